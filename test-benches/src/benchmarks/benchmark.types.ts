/** One figure of a benchmark. Nothing is asserted: a ratio is for people and scripts to judge. */
export interface BenchmarkResult {
  name: string;
  value: number;
  unit: string;
  /** `value` over that of what it is compared with, measured in the same run. */
  ratio: number;
  /** What it is compared with. */
  against: string;
  /** Growth of the heap over ten million repetitions, bytes, where it was looked at. */
  heapGrowthBytes?: number;
}

export interface Benchmark {
  readonly name: string;
  /** One line for the list. */
  readonly purpose: string;
  /** @param options `isFull` asks for as many repetitions as a figure needs that is to be reported */
  run(options?: { isFull?: boolean }): Promise<BenchmarkResult>;
}
