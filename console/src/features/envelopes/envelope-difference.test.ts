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

  it('shows an interlock that was taken away as leaves without an after', () => {
    const differences = envelopeDifferences(content, { ...content, interlocks: [] }, titleOf);
    expect(differences.length).toBeGreaterThan(0);
    expect(differences.every(({ where, after }) => where.startsWith('Interlock ') && after === null)).toBe(
      true,
    );
  });
});
