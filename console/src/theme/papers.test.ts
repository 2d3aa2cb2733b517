import { describe, expect, it } from 'vitest';
import { papers, type SchemeName } from './papers.js';

/** Relative luminance and contrast ratio as WCAG 2.2 defines them. */
function luminance(hex: string): number {
  const channel = (at: number) => {
    const c = parseInt(hex.slice(at, at + 2), 16) / 255;
    return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
  };
  return 0.2126 * channel(1) + 0.7152 * channel(3) + 0.0722 * channel(5);
}

function contrast(a: string, b: string): number {
  const [light, dark] = [luminance(a), luminance(b)].sort((x, y) => y - x) as [number, number];
  return (light + 0.05) / (dark + 0.05);
}

it('measures black on white as 21 to 1, as the standard does', () => {
  expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 5);
});

describe.each(['light', 'dark'] as SchemeName[])('the %s paper', (name) => {
  const paper = papers[name];

  it.each(['ink', 'inkSoft', 'trip', 'warn', 'act'] as const)('reads %s at AA on every ground', (colour) => {
    for (const ground of [paper.ground, paper.sheet, paper.shade]) {
      expect(contrast(paper[colour], ground)).toBeGreaterThanOrEqual(4.5);
    }
  });

  it.each([
    ['trip', 'tripWash'],
    ['warn', 'warnWash'],
    ['act', 'actWash'],
  ] as const)('reads %s at AA on its own wash', (colour, wash) => {
    expect(contrast(paper[colour], paper[wash])).toBeGreaterThanOrEqual(4.5);
  });

  it('draws traces and outlines of controls at 3 to 1', () => {
    for (const colour of [...paper.traces, paper.outline]) {
      expect(contrast(colour, paper.sheet)).toBeGreaterThanOrEqual(3);
    }
  });

  it('reads white on the emergency stop at AA', () => {
    expect(contrast('#ffffff', paper.stopFace)).toBeGreaterThanOrEqual(4.5);
  });
});
