import { describe, expect, it } from 'vitest';
import type { ModelSettings } from '../kit/bench-model.js';
import { feed, hillsOf, settledProduct, shareOf, tanks } from './mixer-physics.js';
import { analyser, driveRatePctPerS, MixerModel, restPositionPct } from './mixer-model.js';

const still: ModelSettings = { seed: 3, isNoisy: false, isDrifting: false };
const even = [1, 1, 1, 1];

function running(change: Partial<ModelSettings> = {}, position = restPositionPct): MixerModel {
  const model = new MixerModel({ ...still, ...change });
  live(model, 3);
  model.write('distributor', position);
  live(model, 150);
  return model;
}

function live(model: MixerModel, forS: number, watch: () => void = () => {}): void {
  const untilS = model.tS + forS;
  while (model.tS < untilS - 1e-9) {
    model.write('heartbeat', model.read('heartbeat') + 1);
    model.advanceTo(model.tS + 0.25);
    watch();
  }
}

describe('the landscape', () => {
  it('parts all of the feed among the tanks', () => {
    for (let position = 0; position <= 100; position += 0.7) {
      const sum = tanks.reduce((total, _, tank) => total + shareOf(position, tank), 0);
      expect(sum).toBeCloseTo(1, 12);
    }
    expect(shareOf(0, 0)).toBe(1);
    expect(shareOf(100, 3)).toBe(1);
  });

  it('has three hills, of which the one at rest is the lowest', () => {
    const hills = hillsOf(even);
    expect(hills).toHaveLength(3);
    const [best, second, third] = hills;
    expect((best?.biomass ?? NaN) / (second?.biomass ?? NaN)).toBeGreaterThan(1.1);
    expect(Math.abs((third?.position ?? NaN) - restPositionPct)).toBeLessThan(5);
    expect((best?.biomass ?? NaN) / (third?.biomass ?? NaN)).toBeGreaterThan(1.25);
  });

  it('has the least waste where the yield is greatest: what is not waste is yield', () => {
    for (const position of [5, 20, 35, 53, 70, 90]) {
      const { biomass, substrate } = settledProduct(position, even);
      expect(biomass).toBeCloseTo(0.5 * (feed.substrate - substrate), 6);
    }
  });

  it('keeps its highest hill through all of the drift', () => {
    for (let corner = 0; corner < 16; corner += 1) {
      const vigour = tanks.map((_, tank) => (corner & (1 << tank) ? 1.04 : 0.96));
      const [best, second] = hillsOf(vigour);
      expect(best?.position).toBeGreaterThan(51);
      expect(best?.position).toBeLessThan(55);
      expect((best?.biomass ?? NaN) / (second?.biomass ?? NaN)).toBeGreaterThan(1.05);
    }
  });
});

describe('the cultures', () => {
  it.each([15, 40, 53, 77])(
    'come to what the balances say at position %i, from wherever they come',
    (position) => {
      const settled = settledProduct(position, even);
      for (const from of [0, 33, 100]) {
        const model = running({}, from);
        model.write('distributor', position);
        live(model, 400);
        expect(model.read('biomass')).toBeCloseTo(settled.biomass, 3);
        expect(model.read('substrate')).toBeCloseTo(settled.substrate, 2);
        expect(model.truth.objective).toBeCloseTo(settled.biomass, 9);
      }
    },
  );

  it('are slow: a move shows nothing for the dead time and takes tens of seconds to show all', () => {
    const model = running();
    const before = model.read('biomass');
    model.write('distributor', 17);
    live(model, analyser.deadTimeS - 0.25);
    expect(model.read('biomass')).toBeCloseTo(before, 4);
    live(model, 10);
    const soon = model.read('biomass');
    live(model, 200);
    const late = model.read('biomass');
    expect(Math.abs(late - before)).toBeGreaterThan(0.03);
    expect(Math.abs(late - soon)).toBeGreaterThan(0.05 * Math.abs(late - before));
  });
});

describe('the plant', () => {
  it('moves the distributor no faster than its drive', () => {
    const model = running();
    model.write('distributor', 100);
    live(model, 2);
    expect(model.read('position')).toBeCloseTo(restPositionPct + 2 * driveRatePctPerS, 6);
  });

  it('stops the feed and goes to rest when the heartbeat stops, and keeps the cultures', () => {
    const model = running({}, 53);
    const before = model.read('biomass');
    model.advanceTo(model.tS + 60);
    expect(model.read('pumpRunning')).toBe(0);
    expect(model.read('feedFlow')).toBe(0);
    expect(model.read('position')).toBeCloseTo(restPositionPct, 9);
    expect(model.truth.objective).toBeNull();
    live(model, 3);
    model.write('distributor', 53);
    live(model, 150);
    expect(model.read('biomass')).toBeCloseTo(before, 2);
  });

  it('drifts with the seed, and repeats itself', () => {
    const best = (seed: number) => running({ seed, isDrifting: true }).truth.best['distributor'];
    expect(best(1)).toBe(best(1));
    expect(best(1)).not.toBe(best(2));
  });

  it('has another highest hill while the second tank is inhibited', () => {
    const model = running({}, 53);
    model.inhibit(true);
    expect(model.truth.best['distributor']).toBeGreaterThan(70);
    model.inhibit(false);
    expect(model.truth.best['distributor']).toBeLessThan(60);
  });
});
