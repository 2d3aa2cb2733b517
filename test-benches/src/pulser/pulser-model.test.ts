import { describe, expect, it } from 'vitest';
import { protection, PulserModel, restSetting } from './pulser-model.js';
import { totalEnergyMJ } from './pulser-plant.js';

/** A pulser with a living host. */
function attended(overrides: Partial<ConstructorParameters<typeof PulserModel>[0]> = {}) {
  const model = new PulserModel({ seed: 1, isNoisy: false, isDrifting: false, ...overrides });
  let beats = 0;
  const go = (forS: number) => {
    const fromS = model.tS;
    for (let i = 1; i <= Math.round(forS * 10); i += 1) {
      model.write('heartbeat', (beats += 1) & 0xffff);
      model.advanceTo(fromS + i / 10);
    }
  };
  go(3);
  return { model, go };
}

/** Integral of the trace, mJ: 1 kW for 10 ns is 0.01 mJ. */
const areaMJ = (trace: Float64Array) => trace.reduce((sum, kw) => sum + kw * 1e-2, 0);

describe('the pulser', () => {
  it('shows in its trace the energy that its meter shows', () => {
    const { model, go } = attended();
    model.write('drive', 60);
    go(12);
    const energy = totalEnergyMJ({ drivePct: 60, delayUs: restSetting.delayUs }, { gain: 1, laterUs: 0 });
    expect(model.read('energy') / energy).toBeCloseTo(1, 2);
    expect(areaMJ(model.readTrace('pulse')) / energy).toBeCloseTo(1, 2);
    expect(model.truth.loss).toBeLessThan(3);
  });

  it('latches its protection over the cliff, goes to rest, and waits for its reset', () => {
    const { model, go } = attended();
    model.write('drive', 95);
    go(15);
    expect([model.read('laserOn'), model.read('protectionTrip')]).toEqual([0, 1]);
    expect(model.truth.loss).toBeNull();
    expect(Math.max(...model.readTrace('pulse'))).toBe(0);
    go(10);
    expect(model.truth.at).toEqual({ drive: restSetting.drivePct, delay: restSetting.delayUs });
    // Where it stays against commands, until somebody looks at it.
    model.write('drive', 50);
    go(5);
    expect(model.read('drive')).toBe(restSetting.drivePct);
    model.write('protectionReset', 1);
    go(1);
    expect([model.read('laserOn'), model.read('protectionTrip'), model.read('drive')]).toEqual([1, 0, 15]);
  });

  it('bears a short excess', () => {
    const { model, go } = attended();
    model.write('drive', 87);
    go(7.2);
    model.write('drive', 40);
    go(10);
    expect(protection.afterS).toBe(1);
    expect(model.read('protectionTrip')).toBe(0);
  });

  it('takes nothing out of range', () => {
    const { model } = attended();
    expect([model.write('drive', 101), model.write('delay', 49), model.write('energy', 1)]).toEqual([
      false,
      false,
      false,
    ]);
  });

  it('goes dark and to rest when the heartbeat stops', () => {
    const { model, go } = attended();
    model.write('drive', 60);
    go(10);
    model.advanceTo(model.tS + 10);
    expect(model.watchdog).toMatchObject({ isTripped: true, count: 1 });
    expect([model.read('laserOn'), model.read('drive')]).toEqual([0, restSetting.drivePct]);
    expect(model.truth.at['drive']).toBeCloseTo(restSetting.drivePct, 9);
  });

  it('has the noise that it states on its trace, and no bias', () => {
    const { model, go } = attended({ isNoisy: true });
    go(1);
    const trace = model.readTrace('pulse');
    const mean = trace.reduce((sum, value) => sum + value, 0) / trace.length;
    const deviation = Math.sqrt(
      trace.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (trace.length - 1),
    );
    // 512 points: four standard errors of the mean are 0.35 kW, of the deviation 13 %.
    expect(Math.abs(mean)).toBeLessThan(0.36);
    expect(deviation).toBeGreaterThan(2 * 0.87);
    expect(deviation).toBeLessThan(2 * 1.13);
  });
});
