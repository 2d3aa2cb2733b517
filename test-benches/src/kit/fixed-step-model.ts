import type { RigModelValue } from '@cresthold/shared';
import type { BenchModel, BenchTruth, ModelSettings } from './bench-model.js';
import type { WatchdogState } from './heartbeat-watchdog.js';
import { seededRandom, type SeededRandom } from './seeded-random.js';

/** A value that the wire can ask for; left-out fields mean: a pure number, read only, one point. */
export type ValueDeclaration = Pick<RigModelValue, 'name'> & Partial<RigModelValue>;

/** How a model goes on. */
export interface StepPlan {
  /** Time step of the physics, s of bench time. */
  readonly stepS: number;
  /** Steps between two readings of the instruments, 1 for one in each step. */
  readonly stepsPerReading: number;
}

/**
 * A bench's model in fixed steps of bench time. What lies between two steps does not matter, so that the
 * course depends on seed and writes alone, not on how often anybody looks.
 */
export abstract class FixedStepModel implements BenchModel {
  readonly values: readonly RigModelValue[];
  protected readonly random: SeededRandom;
  private readonly indexOf: ReadonlyMap<string, number>;
  private readonly shown: Float64Array;
  private readonly traces: readonly (Float64Array | null)[];
  private steps = 0;

  protected constructor(
    declarations: readonly ValueDeclaration[],
    protected readonly settings: ModelSettings,
    private readonly plan: StepPlan,
  ) {
    this.values = declarations.map((value) => ({ unit: '', isWritable: false, points: 1, ...value }));
    this.indexOf = new Map(this.values.map(({ name }, index) => [name, index]));
    this.shown = new Float64Array(this.values.length);
    this.traces = this.values.map(({ points }) => (points > 1 ? new Float64Array(points) : null));
    this.random = seededRandom(settings.seed);
  }

  abstract readonly watchdog: Readonly<WatchdogState>;
  abstract readonly truth: BenchTruth;
  abstract reboot(): void;
  /** One step of the physics. @param tS bench time at its end, s */
  protected abstract step(tS: number, dtS: number): void;
  /** Tells by `show` and `showTrace` what the instruments read now, noise and all. */
  protected abstract takeReadings(): void;
  /** Takes a command, judged already for its name; what it refuses changes nothing. */
  protected abstract take(name: string, value: number): boolean;

  get tS(): number {
    return this.steps * this.plan.stepS;
  }

  advanceTo(tS: number): void {
    const { stepS, stepsPerReading } = this.plan;
    // Summed times fall short of a step by their rounding; that must not cost a step.
    const goal = Math.floor(tS / stepS + 1e-6);
    while (this.steps < goal) {
      const beforeS = this.tS;
      this.steps += 1;
      this.step(this.tS, this.tS - beforeS);
      if (this.steps % stepsPerReading === 0) this.takeReadings();
    }
  }

  read(name: string): number {
    return this.shown[this.placeOf(name)] ?? NaN;
  }

  readTrace(name: string): Float64Array {
    const trace = this.traces[this.placeOf(name)];
    if (!trace) throw new RangeError(`"${name}" is no trace.`);
    return trace;
  }

  write(name: string, value: number): boolean {
    const isWritable = this.values[this.placeOf(name)]?.isWritable ?? false;
    if (!isWritable || !Number.isFinite(value)) return false;
    return this.take(name, value);
  }

  /** Sets what the wire shows under a name. */
  protected show(name: string, value: number): void {
    this.shown[this.placeOf(name)] = value;
  }

  /** Gaussian noise of this deviation; 0 where noise is off. */
  protected noise(deviation: number): number {
    return this.settings.isNoisy ? deviation * this.random.normal() : 0;
  }

  private placeOf(name: string): number {
    const index = this.indexOf.get(name);
    if (index === undefined) throw new RangeError(`The model has no value "${name}".`);
    return index;
  }
}
