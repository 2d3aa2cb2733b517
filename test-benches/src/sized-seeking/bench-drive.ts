import type { BenchModel } from '../kit/bench-model.js';
import type { SizedBench } from './sized-bench.js';

/** Time after which every bench's watchdog has let go, s. */
const warmUpS = 15;

/** Scans a bench in virtual time: read, then write, heartbeat included. */
export class BenchDrive {
  readonly model: BenchModel;
  private scans = 0;

  constructor(
    private readonly bench: SizedBench,
    seed: number,
  ) {
    this.model = bench.make({ seed, isNoisy: true, isDrifting: bench.isDrifting });
    const middle = bench.actuators.map(({ min, max }) => (min + max) / 2);
    for (let tS = 0; tS < warmUpS; tS += bench.scanS) this.scan(middle);
  }

  /** @returns the objective, one scan after the actuators were told these values */
  scan(values: readonly number[]): number {
    this.bench.actuators.forEach(({ name, resolution }, i) => {
      this.model.write(name, Math.round((values[i] ?? NaN) / resolution) * resolution);
    });
    this.bench.eachScan?.(this.model);
    this.scans += 1;
    this.model.write('heartbeat', this.scans & 0xffff);
    this.model.advanceTo(this.scans * this.bench.scanS);
    return this.bench.objective(this.model);
  }

  /** Goes somewhere with no more than the slew limits. */
  goTo(from: readonly number[], to: readonly number[]): void {
    const scansOf = this.bench.actuators.map(({ slewPerS }, i) =>
      slewPerS === null ? 1 : Math.abs((to[i] ?? NaN) - (from[i] ?? NaN)) / (slewPerS * this.bench.scanS),
    );
    const scans = Math.max(1, Math.ceil(Math.max(...scansOf)));
    for (let k = 1; k <= scans; k += 1) {
      this.scan(from.map((value, i) => value + (((to[i] ?? NaN) - value) * k) / scans));
    }
  }
}
