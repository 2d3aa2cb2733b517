import { createScanEngine, Quality, type ScanEngine } from '@cresthold/shared';
import { demoScenario } from '../demo/demo-scenario.js';
import type { Benchmark } from './benchmark.types.js';

const scans = 50_000;
const rounds = 5;

/** What the wire would bring in, by channel. */
const shown: Record<string, number> = {
  airTrim: 70,
  heartbeat: 1,
  damper: 70,
  o2: 8.5,
  co: 12,
  flueTemp: 195,
  airTemp: 20,
  flame: 1,
  watchdogFlag: 0,
  fuelFlow: 12.5,
};

/**
 * The pure core of a scan for the demonstration rig, armed: derived channels, interlocks, staleness, guard,
 * against its three derived channels written out by hand.
 */
export const engineScan: Benchmark = {
  name: 'engine-scan',
  purpose: 'Scans per second of the pure engine against its formulas written out by hand.',
  run() {
    const engine = armedEngine();
    const times = { engine: [] as number[], bare: [] as number[] };
    for (let round = 0; round < rounds; round += 1) {
      times.engine.push(secondsOf(() => runEngine(engine, round)));
      times.bare.push(secondsOf(runBare));
    }
    const scansPerS = scans / median(times.engine);
    return Promise.resolve({
      name: this.name,
      value: scansPerS,
      unit: 'scans/s',
      ratio: scansPerS / (scans / median(times.bare)),
      against: 'its readings set and its three derived channels computed by hand',
    });
  },
};

function armedEngine(): ScanEngine {
  const entry = demoScenario({ benchHost: '127.0.0.1', benchPort: 1 }).rigs[0];
  if (!entry) throw new Error('The demo scenario has no rig.');
  const engine = createScanEngine({
    rig: entry.rig,
    envelope: { id: 'benchmark', version: 1, content: entry.envelope.content },
    trip: null,
    isLockedOut: false,
    grids: new Map([['airTrim', { step: 0.01, origin: 0 }]]),
  });
  for (let i = 0; i < 100; i += 1) scanOnce(engine, i * 0.05);
  engine.arm('benchmark');
  return engine;
}

let wallMs = 0;
function scanOnce(engine: ScanEngine, tS: number): void {
  const { readings } = engine;
  for (const [channel, value] of Object.entries(shown)) {
    readings.set(readings.indexOf(channel), value, Quality.good);
  }
  engine.scan({ tS, dtS: 0.05, atMs: (wallMs += 50), latenessS: 0, lostConnections: [], serverSilentS: 0 });
}

function runEngine(engine: ScanEngine, round: number): void {
  const originS = 10 + round * scans * 0.05;
  for (let i = 0; i < scans; i += 1) scanOnce(engine, originS + i * 0.05);
  if (engine.status().phase !== 'armed') throw new Error('The engine left "armed": it measured a stop.');
}

const bare = new Map<string, number>();
function runBare(): void {
  for (let i = 0; i < scans; i += 1) {
    for (const [channel, value] of Object.entries(shown)) bare.set(channel, value);
    const get = (channel: string) => bare.get(channel) ?? NaN;
    const stack = (get('flueTemp') - get('airTemp')) * (0.66 / (21 - get('o2')) + 0.009);
    const co = get('co') / 10_000;
    const unburnt = (35.27 * co) / (co + (11.8 * (21 - get('o2'))) / 21);
    bare.set('efficiency', 100 - stack - unburnt);
  }
}

function secondsOf(act: () => void): number {
  const startMs = performance.now();
  act();
  return (performance.now() - startMs) / 1000;
}

function median(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)] ?? NaN;
}
