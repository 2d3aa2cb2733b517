/** The memory of a test server: what exists can be read, what is missing answers exception 02. */
export class RegisterMap {
  readonly coils = new Map<number, boolean>();
  readonly discreteInputs = new Map<number, boolean>();
  readonly holding = new Map<number, number>();
  readonly input = new Map<number, number>();
}

/** A server of an independent implementation on a port of its own. */
export interface ModbusTestServer {
  readonly port: number;
  readonly map: RegisterMap;
  /** Number of open connections. */
  readonly connections: number;
  /** Ends the open connections without a word; new ones are welcome. */
  cut(): void;
  stop(): Promise<void>;
}
