/**
 * Counts the hills of a curve whose prominence (height above the higher of the two saddles that part it
 * from higher ground) is above a threshold, by walking left and right from each point: what `findHills` is
 * held against. The ends of the curve can be hills. A flat curve is one hill.
 */
export function countPeaks(heights: readonly number[], prominenceMin: number): number {
  let count = 0;
  for (let i = 0; i < heights.length; i += 1) {
    const height = heights[i] ?? NaN;
    // Of a plateau only its left end stands for the hill.
    if (i > 0 && (heights[i - 1] ?? NaN) >= height) continue;
    const left = saddle(heights, i, -1);
    const right = saddle(heights, i, 1);
    const isHighest = !left.hasHigher && !right.hasHigher;
    const saddleHeight = Math.max(
      left.hasHigher ? left.lowest : -Infinity,
      right.hasHigher ? right.lowest : -Infinity,
    );
    if (isHighest || height - saddleHeight > prominenceMin) count += 1;
  }
  return count === 0 && heights.length > 0 ? 1 : count;
}

/** Walks from a point to higher ground (or, to the left, to equal ground that has been counted already). */
function saddle(heights: readonly number[], from: number, step: 1 | -1) {
  const height = heights[from] ?? NaN;
  let lowest = height;
  for (let i = from + step; i >= 0 && i < heights.length; i += step) {
    const here = heights[i] ?? NaN;
    if (here > height || (step === -1 && here === height)) return { hasHigher: true, lowest };
    lowest = Math.min(lowest, here);
  }
  return { hasHigher: false, lowest };
}
