import { describe, expect, it } from 'vitest';
import { demoEnvelope } from '../../testing/documents.js';
import { envelopeDifferences } from './envelope-difference.js';

const { content } = demoEnvelope;
const titleOf = (channel: string) => `<${channel}>`;

describe('the difference between two envelopes', () => {
  it('is nothing between equals', () => {
    expect(envelopeDifferences(content, structuredClone(content), titleOf)).toEqual([]);
  });

  it('names the one leaf that was changed, with both values', () => {
    const changed = structuredClone(content);
    if (changed.limits[0]) changed.limits[0].max = 15;
    expect(envelopeDifferences(content, changed, titleOf)).toEqual([
      { where: '<airTrim> · Upper limit', before: '20', after: '15' },
    ]);
  });

  it('names a change of hysteresis, bypass and of an emergency-stop input in words', () => {
    const changed = structuredClone(content);
    const [lock] = changed.interlocks;
    if (lock) lock.proofTestEveryDays = 30;
    changed.emergencyStopInputs = [{ channel: 'o2', title: 'At the door', pressedWhen: 'not-zero' }];
    expect(envelopeDifferences(content, changed, titleOf)).toEqual([
      { where: 'Interlock co-high · Proof test every', before: 'none', after: '30' },
      { where: 'Emergency-stop input <o2> · Title', before: null, after: 'At the door' },
      { where: 'Emergency-stop input <o2> · Pressed when it reads', before: null, after: 'anything but 0' },
    ]);
  });

  it('shows an interlock that was taken away as leaves without an after', () => {
    const differences = envelopeDifferences(content, { ...content, interlocks: [] }, titleOf);
    expect(differences.length).toBeGreaterThan(0);
    expect(differences.every(({ where, after }) => where.startsWith('Interlock ') && after === null)).toBe(
      true,
    );
  });
});
