import { describe, expect, it } from 'vitest';
import type { ModelSettings } from '../kit/bench-model.js';
import { CouplingModel, restDriveV } from './coupling-model.js';

const still: ModelSettings = { seed: 3, isNoisy: false, isDrifting: false };

function running(change: Partial<ModelSettings> = {}): CouplingModel {
  const model = new CouplingModel({ ...still, ...change });
  live(model, 3);
  return model;
}

/** Lets a host live, and tells of each twentieth of a second. */
function live(model: CouplingModel, forS: number, watch: () => void = () => {}): void {
  const untilS = model.tS + forS;
  while (model.tS < untilS - 1e-9) {
    model.write('heartbeat', model.read('heartbeat') + 1);
    model.advanceTo(model.tS + 0.05);
    watch();
  }
}

/** Walks both drives in steps to where it is told. */
function drive(model: CouplingModel, x: number, y: number): void {
  model.write('driveX', x);
  model.write('driveY', y);
  live(model, 0.5);
}

const place = ({ truth: { at, best } }: CouplingModel) => ({
  x: (best['x'] ?? NaN) - (at['x'] ?? NaN),
  y: (best['y'] ?? NaN) - (at['y'] ?? NaN),
});
const distance = (model: CouplingModel) => Math.hypot(place(model).x, place(model).y);

/** Drives to the best place as only somebody who knows it can: by a few corrections. */
function goToBest(model: CouplingModel): void {
  for (let i = 0; i < 8; i += 1) {
    const { x, y } = place(model);
    drive(model, model.read('driveX') + x / 0.4, model.read('driveY') + y / 0.4);
  }
}

describe('the coupling', () => {
  it.each([1, 2, 3, 4, 5])('with seed %i begins on a ring, and its best place can be reached', (seed) => {
    const model = running({ seed });
    expect(distance(model)).toBeGreaterThan(9.9);
    expect(model.truth.loss).toBeGreaterThan(8);
    goToBest(model);
    expect(distance(model)).toBeLessThan(0.3);
    expect(model.truth.loss).toBeLessThan(0.05);
  });

  it('shows the power that the pupil couples, less the loss of the tilt', () => {
    const model = running();
    goToBest(model);
    // 3 dBm, −4.72 dB past the obscuration, −0.07 dB for 0.012 rad of tilt (see the physics' tests).
    expect(model.read('powerDbm')).toBeCloseTo(3 - 4.72 - 0.07, 1);
    expect(10 * Math.log10(model.read('powerMw'))).toBeCloseTo(model.read('powerDbm'), 9);
  });

  it('takes a little of one axis along with the other', () => {
    const model = running();
    const before = model.truth.at;
    drive(model, 80, restDriveV);
    const after = model.truth.at;
    const moved = (axis: 'x' | 'y') => (after[axis] ?? NaN) - (before[axis] ?? NaN);
    expect(moved('x')).toBeGreaterThan(9);
    expect(moved('y') / moved('x')).toBeCloseTo(-0.08, 6);
  });

  it('stands elsewhere at the same drive when it comes from the other side', () => {
    const from = (side: number) => {
      const model = running();
      drive(model, side, restDriveV);
      drive(model, restDriveV, restDriveV);
      return model.truth.at['x'] ?? NaN;
    };
    // 2·Σ cᵢ·rᵢ of the plays.
    expect(from(90) - from(10)).toBeCloseTo(2 * (0.04 * 1.5 + 0.035 * 4 + 0.025 * 8), 2);
  });

  it('is knocked off the peak by a bump, and its best place stays in reach', () => {
    const model = running();
    for (let i = 0; i < 10; i += 1) {
      goToBest(model);
      model.bump();
      live(model, 0.5);
      expect(distance(model)).toBeGreaterThan(8.5);
      expect(distance(model)).toBeLessThan(13.5);
      expect(model.truth.loss).toBeGreaterThan(8);
    }
  });

  it('drifts', () => {
    const model = running({ isDrifting: true });
    goToBest(model);
    live(model, 200);
    expect(distance(model)).toBeGreaterThan(0.5);
    expect(distance(model)).toBeLessThan(10);
  });

  it('closes its shutter and goes to rest when the heartbeat stops', () => {
    const model = running();
    drive(model, 80, 20);
    model.advanceTo(model.tS + 3);
    expect(model.read('shutterOpen')).toBe(0);
    expect([model.read('driveX'), model.read('driveY')]).toEqual([restDriveV, restDriveV]);
    expect(model.read('powerDbm')).toBeLessThan(-60);
    expect(model.truth.objective).toBeNull();
    model.write('driveX', 80);
    expect(model.read('driveX')).toBe(restDriveV);
  });

  it('repeats itself for the same seed', () => {
    const course = (seed: number) => {
      const model = running({ seed, isNoisy: true, isDrifting: true });
      const shown: number[] = [];
      live(model, 5, () => shown.push(model.read('powerMw')));
      return shown;
    };
    expect(course(1)).toEqual(course(1));
    expect(course(1)).not.toEqual(course(2));
  });
});
