import { Quality } from '../rigs/quality.js';
import type { RunEventBody } from '../runs/run-event.schema.js';
import { createScanEngine } from '../scan/scan-engine.js';
import type { ScanOutput, ValueGrid } from '../scan/scan-engine.types.js';
import { testChain, testEnvelope, testObjective, testRig, testStep } from './experiment.fixture.js';
import type { SeekActuator, SeekParameters } from './seek/seek-parameters.schema.js';

/** Where the plant is best, and how it bends there: y = 90 − (trim − 2.3)² − 0.04·(load − 45)². */
export const bestOf = { trim: 2.3, load: 45 };
export const curvatureOf = { trim: 2, load: 0.08 };
export const slewOf = { trim: 4, load: 20 };
const scanS = 0.05;

/** An envelope that lets both actuators dither. */
export const seekEnvelope = testEnvelope({
  limits: testEnvelope().limits.map((limit) => ({
    ...limit,
    slewPerS: limit.channel === 'trim' ? slewOf.trim : slewOf.load,
    ditherAmplitudeMax: limit.channel === 'trim' ? 1 : 4,
  })),
});

export interface SeekCourse {
  events: RunEventBody[];
  /** What was written in each scan of the run. */
  writes: { tS: number; trim: number; load: number }[];
  results: Record<string, number>;
  ended: ScanOutput['runEnded'];
}

export interface SeekCase {
  law: SeekParameters['law'];
  actuators: SeekActuator[];
  change?: Partial<SeekParameters>;
  /** Pauses the run at this time for so long, s. */
  pauseAtS?: number;
  pauseForS?: number;
  grids?: ReadonlyMap<string, ValueGrid>;
  /** Time since the scan before by the number of the scan, s. */
  dtS?: (n: number) => number;
  isLit?: (tS: number) => boolean;
  /** Ripple on the measured value of `trim` that is not commanded, % at a time. */
  rippleOf?: (tS: number) => number;
}

/** Seeks through the whole scan engine: interlocks, guard and held bases as on a rig, 50 ms a scan. */
export function seekInEngine(seek: SeekCase): SeekCourse {
  const { law, actuators, change = {}, dtS = () => scanS, isLit = () => true, rippleOf = () => 0 } = seek;
  const grids = seek.grids ?? new Map(['trim', 'load'].map((channel) => [channel, { step: 0, origin: 0 }]));
  const engine = createScanEngine({
    rig: testRig(),
    envelope: { id: 'e', version: 1, content: seekEnvelope },
    trip: null,
    isLockedOut: false,
    grids,
  });
  const step = testStep('seek', { law, actuators, invalidForS: 5, ...change });
  const graph = testChain(step, testStep('hold', { durationS: 0.2 }));
  const at: Record<string, number> = { trim: 0, load: 40, beat: 0, flame: 1 };
  const course: SeekCourse = { events: [], writes: [], results: {}, ended: null };
  let tS = 0;
  let pausedS = NaN;
  for (let n = 1; n < 20_000 && !course.ended; n += 1) {
    const dt = dtS(n);
    tS += dt;
    const trim = (at['trim'] ?? NaN) + rippleOf(tS);
    at['flame'] = isLit(tS) ? 1 : 0;
    at['yield'] = 90 - (trim - bestOf.trim) ** 2 - 0.04 * ((at['load'] ?? NaN) - bestOf.load) ** 2;
    engine.readings.channelIds.forEach((id, i) => {
      const value = id === 'trim' ? trim : (at[id] ?? NaN);
      if (id !== 'loss') engine.readings.set(i, value, Quality.good);
    });
    const input = { tS, dtS: dt, atMs: tS * 1000, latenessS: 0, lostConnections: [], serverSilentS: 0 };
    const output = engine.scan(input);
    for (const { channel, value } of output.writes) at[channel] = value;
    if (n > 4) course.writes.push({ tS, trim: at['trim'] ?? NaN, load: at['load'] ?? NaN });
    course.events.push(...output.events.map(({ body }) => body));
    course.ended = output.runEnded;
    if (n === 2) engine.arm('technician');
    if (n === 4) engine.startRun(orderOf(graph));
    if (seek.pauseAtS !== undefined && Number.isNaN(pausedS) && tS >= seek.pauseAtS) {
      engine.pause('technician', 'A look at the rig.');
      pausedS = tS;
    }
    if (tS >= pausedS + (seek.pauseForS ?? 1)) {
      engine.resume('technician');
      pausedS = Infinity;
    }
  }
  for (const event of course.events)
    if (event.type === 'step.ended') Object.assign(course.results, event.results);
  return course;
}

function orderOf(graph: ReturnType<typeof testChain>) {
  return {
    runId: 'r',
    file: 'r.sqlite',
    by: 'engineer',
    experiment: { id: 'x', title: 'X', version: 1, graph },
    objective: testObjective(),
    manifest: {},
  };
}

/** By how much a write went further from the one before than the slew limit allows, or out of the envelope. */
export function worstOf({ writes }: SeekCourse): { slew: number; range: number } {
  let slew = -Infinity;
  let range = -Infinity;
  writes.forEach((write, i) => {
    const before = writes[i - 1];
    range = Math.max(range, Math.abs(write.trim) - 10, -write.load, write.load - 100);
    if (!before) return;
    const dtS = Math.min(write.tS - before.tS, 2 * scanS);
    slew = Math.max(slew, Math.abs(write.trim - before.trim) - slewOf.trim * dtS);
    slew = Math.max(slew, Math.abs(write.load - before.load) - slewOf.load * dtS);
  });
  return { slew, range };
}
