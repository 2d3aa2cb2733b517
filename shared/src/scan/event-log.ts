import { guardRules } from '../envelopes/guard.js';
import type { RunEventBody } from '../runs/run-event.schema.js';
import type { HeldActuator } from './actuator-bank.js';
import type { ScanOutput } from './scan-engine.types.js';

/** Repeated events of one kind are joined into one a second, with their running count. */
const joinedForS = 1;

interface Joined {
  saidAtS: number;
  saidCount: number;
}

/** Collects the events of a scan, and those that commands leave for the next scan. */
export class EventLog {
  private readonly waiting: RunEventBody[] = [];
  private guardSaid = new WeakMap<HeldActuator, Joined[]>();
  private readonly overruns = { saidAtS: -Infinity, count: 0, worstS: 0, longest: 0 };
  private isScanOpen = false;
  private runTS = 0;
  private atMs = 0;

  constructor(private readonly events: ScanOutput['events']) {}

  /** Begins a scan: what commands left comes first. */
  beginScan(runTS: number | null, atMs: number): void {
    this.events.length = 0;
    this.runTS = runTS ?? 0;
    this.atMs = atMs;
    this.isScanOpen = true;
    if (this.waiting.length === 0) return;
    for (const body of this.waiting) this.add(body);
    this.waiting.length = 0;
  }

  endScan(): void {
    this.isScanOpen = false;
  }

  /** Adds to this scan; from a command between two scans, to the next one. */
  add(body: RunEventBody): void {
    if (this.isScanOpen) this.events.push({ runTS: this.runTS, atMs: this.atMs, body });
    else this.waiting.push(body);
  }

  /** A new run counts its interventions from zero. */
  beginRun(actuators: readonly HeldActuator[]): void {
    this.guardSaid = new WeakMap();
    this.clearOverruns(-Infinity);
    for (const actuator of actuators) actuator.guarded.counts.fill(0);
  }

  /** Says how often the guard intervened: at once the first time, then once a second, and at the end. */
  sayInterventions(actuators: readonly HeldActuator[], tS: number, isLast: boolean): void {
    for (const actuator of actuators) {
      for (let rule = 0; rule < guardRules.length; rule++) this.sayRule(actuator, rule, tS, isLast);
    }
  }

  /** @param consecutive overruns in a row up to this one */
  noteOverrun(latenessS: number, consecutive: number): void {
    const { overruns } = this;
    overruns.count += 1;
    overruns.worstS = Math.max(overruns.worstS, latenessS);
    overruns.longest = Math.max(overruns.longest, consecutive);
  }

  /** Says what was noted: at once the first time, then joined once a second, and at the end. */
  sayOverruns(tS: number, isLast: boolean): void {
    const { saidAtS, count, worstS, longest } = this.overruns;
    if (count === 0 || (tS - saidAtS < joinedForS && !isLast)) return;
    this.add({ type: 'scan.overran', latenessMs: worstS * 1000, consecutive: longest, count });
    this.clearOverruns(tS);
  }

  private clearOverruns(saidAtS: number): void {
    Object.assign(this.overruns, { saidAtS, count: 0, worstS: 0, longest: 0 });
  }

  private sayRule(actuator: HeldActuator, index: number, tS: number, isLast: boolean): void {
    const count = actuator.guarded.counts[index] ?? 0;
    const rule = guardRules[index];
    if (count === 0 || !rule) return;
    const said = this.saidOf(actuator, index);
    if (count === said.saidCount || (tS - said.saidAtS < joinedForS && !isLast)) return;
    said.saidAtS = tS;
    said.saidCount = count;
    const requested = Number.isFinite(actuator.requested) ? actuator.requested : null;
    const applied = actuator.guarded.applied;
    this.add({ type: 'guard.intervened', channel: actuator.channel, rule, requested, applied, count });
  }

  private saidOf(actuator: HeldActuator, index: number): Joined {
    let said = this.guardSaid.get(actuator);
    if (!said) {
      said = guardRules.map(() => ({ saidAtS: -Infinity, saidCount: 0 }));
      this.guardSaid.set(actuator, said);
    }
    return said[index] as Joined;
  }
}
