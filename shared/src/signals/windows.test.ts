import { describe, expect, it } from 'vitest';
import {
  coherentGain,
  noiseBandwidthBins,
  scallopFactor,
  windowWeights,
  type WindowKind,
} from './windows.js';

describe('windows', () => {
  // Harris (1978), table I (from memory): coherent gain, noise bandwidth and scallop loss, except the loss of
  // Hamming, 1.7514 dB in Heinzel, Rüdiger and Schilling (2002, from memory). Flat-top: noise bandwidth 3.7702
  // of SciPy 1.17.1; loss about 0.01 dB.
  it.each<[WindowKind, number, number, number]>([
    ['rectangular', 1, 1, 3.92],
    ['hann', 0.5, 1.5, 1.42],
    ['hamming', 0.54, 1.36, 1.7514],
    ['blackman', 0.42, 1.73, 1.1],
    ['flat-top', 0.2156, 3.77, 0.01],
  ])('%s has its published figures', (kind, gain, bandwidth, lossDb) => {
    const weights = windowWeights(kind, 1024);
    expect(coherentGain(weights)).toBeCloseTo(gain, 4);
    expect(Math.abs(noiseBandwidthBins(weights) - bandwidth)).toBeLessThan(0.005);
    expect(Math.abs(-20 * Math.log10(scallopFactor(weights)) - lossDb)).toBeLessThan(0.011);
  });

  // SciPy 1.17.1 signal.get_window(kind, 16, fftbins=True), weights 1 and 5.
  it.each<[WindowKind, number, number]>([
    ['hann', 0.03806023374435663, 0.6913417161825449],
    ['hamming', 0.11501541504480817, 0.7160343788879413],
    ['blackman', 0.014628776239280404, 0.5547731736876211],
    ['flat-top', -0.005268058476261594, 0.10174541538894774],
  ])('%s weights agree with an independent implementation', (kind, second, sixth) => {
    const weights = windowWeights(kind, 16);
    expect(weights[1]).toBeCloseTo(second, 14);
    expect(weights[5]).toBeCloseTo(sixth, 14);
  });

  it('symmetric windows are their own mirror image and reach their ends', () => {
    const weights = windowWeights('hann', 9, 'symmetric');
    expect(weights[0]).toBeCloseTo(0, 15);
    expect(weights[4]).toBe(1);
    weights.forEach((weight, i) => expect(weight).toBeCloseTo(weights[8 - i]!, 14));
  });

  it('refuses a length of no whole number', () => {
    expect(windowWeights('hann', 1)).toEqual(Float64Array.of(1));
    expect(() => windowWeights('hann', 2.5)).toThrow(/length/);
  });
});
