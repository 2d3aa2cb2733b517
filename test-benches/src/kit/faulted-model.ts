import type { RigModel, RigModelValue } from '@cresthold/shared';
import type { BenchModel, OwnFault } from './bench-model.js';
import { commonFaults, rebootS, type CommonFault, type PlannedFault } from './faults.js';

export interface FaultSettings<M extends BenchModel = BenchModel> {
  readonly planned: readonly PlannedFault[];
  readonly ownFaults: readonly OwnFault<M>[];
  /** Value that `nan` strikes where none is named. */
  readonly nanValue: string;
  /** Values that faults of instruments pass by. */
  readonly controllerValues: ReadonlySet<string>;
}

/** Told when a fault begins and ends. */
export type OnFault = (fault: string, isOn: boolean) => void;

/** A bench's model as its wire sees it: with the faults that were planned or that an instructor sets. */
export class FaultedModel<M extends BenchModel = BenchModel> implements RigModel {
  readonly kinds: readonly string[];
  onFault: OnFault = () => {};
  private plan: readonly PlannedFault[];
  private byHand: PlannedFault | null = null;
  private active: readonly PlannedFault[] = [];
  private nowS = 0;
  /** What the instruments showed when they froze; null while they live. */
  private frozen: Map<string, number | Float64Array> | null = null;

  constructor(
    readonly model: M,
    private readonly settings: FaultSettings<M>,
  ) {
    this.plan = settings.planned;
    this.kinds = [...Object.keys(commonFaults), ...settings.ownFaults.map(({ name }) => name)];
    this.judge();
  }

  get values(): readonly RigModelValue[] {
    return this.model.values;
  }

  get tS(): number {
    return this.model.tS;
  }

  /** Code of the fault that an instructor has set, 0 for none: its place in `kinds`, from 1. */
  get faultByHand(): number {
    return this.byHand === null ? 0 : this.kinds.indexOf(this.byHand.kind) + 1;
  }

  /** @returns whether there is such a fault; a restart is over by itself and leaves 0 behind */
  setFaultByHand(code: number): boolean {
    const kind = this.kinds[code - 1];
    if (code !== 0 && kind === undefined) return false;
    const fault = kind === undefined ? null : { kind, of: null, fromS: this.nowS, untilS: Infinity };
    if (kind === 'reboot') {
      this.plan = [...this.plan, { kind, of: null, fromS: this.nowS, untilS: this.nowS + rebootS }];
      this.byHand = null;
    } else this.byHand = fault;
    this.judge();
    return true;
  }

  isActive(kind: CommonFault): boolean {
    return this.active.some((fault) => fault.kind === kind);
  }

  isOfController(name: string): boolean {
    return this.settings.controllerValues.has(name);
  }

  advanceTo(tS: number): void {
    const edges = this.plan
      .flatMap(({ fromS, untilS }) => [fromS, untilS])
      .filter((edgeS) => edgeS > this.nowS && edgeS <= tS)
      .sort((a, b) => a - b);
    for (const edgeS of [...edges, Math.max(tS, this.nowS)]) {
      this.model.advanceTo(edgeS);
      this.nowS = edgeS;
      this.judge();
    }
  }

  read(name: string): number {
    if (this.isNan(name)) return NaN;
    const kept = this.keptOf(name);
    return typeof kept === 'number' ? kept : this.model.read(name);
  }

  readTrace(name: string): Float64Array {
    const trace = this.model.readTrace(name);
    if (this.isNan(name)) return new Float64Array(trace.length).fill(NaN);
    const kept = this.keptOf(name);
    return kept instanceof Float64Array ? kept : trace;
  }

  write(name: string, value: number): boolean {
    return this.model.write(name, value);
  }

  private isNan(name: string): boolean {
    return this.active.some(({ kind, of }) => kind === 'nan' && (of ?? this.settings.nanValue) === name);
  }

  private keptOf(name: string): number | Float64Array | undefined {
    return this.isOfController(name) ? undefined : this.frozen?.get(name);
  }

  /** Begins and ends faults by the present time. */
  private judge(): void {
    const all = this.byHand === null ? this.plan : [...this.plan, this.byHand];
    const now = all.filter(({ fromS, untilS }) => fromS <= this.nowS && this.nowS < untilS);
    const before = this.active;
    this.active = now;
    for (const fault of before) if (!now.includes(fault)) this.turn(fault, false);
    for (const fault of now) if (!before.includes(fault)) this.turn(fault, true);
  }

  private turn({ kind, of }: PlannedFault, isOn: boolean): void {
    if (kind === 'freeze') this.frozen = this.isActive('freeze') ? (this.frozen ?? this.snapshot()) : null;
    if (kind === 'reboot' && isOn) this.model.reboot();
    const own = this.settings.ownFaults.find(({ name }) => name === kind);
    if (isOn) own?.begin(this.model);
    else own?.end?.(this.model);
    this.onFault(of === null ? kind : `${kind}.${of}`, isOn);
  }

  private snapshot(): Map<string, number | Float64Array> {
    return new Map(
      this.values.map(({ name, points }) => [
        name,
        points > 1 ? this.model.readTrace(name).slice() : this.model.read(name),
      ]),
    );
  }
}
