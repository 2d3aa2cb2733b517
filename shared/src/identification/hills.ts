/** A place that is higher than all around it. */
export interface Hill {
  /** Index of its top; of a plateau one of its points. */
  index: number;
  height: number;
  /**
   * Height of the top above the highest pass to higher ground; of the highest hill above the lowest point that
   * can be reached from it.
   */
  prominence: number;
}

/**
 * All hills of a map, the most prominent first, by flooding it from above: as the water falls, tops appear as
 * islands, and when two islands meet, the lower one's prominence is known. Works on a line and on a grid alike.
 *
 * @param heights one per point; points that are no finite number are not on the map
 * @param neighboursOf indices beside a point, itself not among them
 * @source topographic prominence; the flooding is a union–find, R. E. Tarjan (1975), Journal of the ACM 22:215–225
 */
export function findHills(
  heights: ArrayLike<number>,
  neighboursOf: (index: number) => readonly number[],
): Hill[] {
  const falling = Array.from(heights, (_, i) => i)
    .filter((i) => Number.isFinite(heights[i]))
    .sort((a, b) => heights[b]! - heights[a]! || a - b);
  const islands = new Islands(heights);
  const hills: Hill[] = [];
  for (const index of falling) {
    const shores = [
      ...new Set(
        neighboursOf(index)
          .map((i) => islands.topOf(i))
          .filter((top) => top >= 0),
      ),
    ];
    shores.sort((a, b) => heights[b]! - heights[a]! || a - b);
    const [highest = index, ...lower] = shores;
    islands.join(index, highest);
    for (const top of lower) {
      const prominence = heights[top]! - heights[index]!;
      // Two points of one plateau are one hill.
      if (prominence > 0) hills.push({ index: top, height: heights[top]!, prominence });
      islands.join(top, highest);
    }
  }
  return [...hills, ...islands.last(falling)].sort(
    // Rounding can make two prominences equal; the higher hill goes first then.
    (a, b) => b.prominence - a.prominence || b.height - a.height || a.index - b.index,
  );
}

/** Which island each point above the water belongs to, named by its top. */
class Islands {
  private readonly parents = new Map<number, number>();
  private readonly lowest = new Map<number, number>();

  constructor(private readonly heights: ArrayLike<number>) {}

  /** −1 where the point is still under water. */
  topOf(index: number): number {
    let top = this.parents.get(index);
    if (top === undefined) return -1;
    while (this.parents.get(top) !== top) top = this.parents.get(top)!;
    this.parents.set(index, top);
    return top;
  }

  join(index: number, top: number): void {
    const low = Math.min(
      this.lowest.get(index) ?? this.heights[index]!,
      this.lowest.get(top) ?? this.heights[top]!,
    );
    this.parents.set(index, top);
    this.lowest.set(top, low);
  }

  /** Hills whose islands met no higher one. */
  last(points: readonly number[]): Hill[] {
    return points
      .filter((i) => this.parents.get(i) === i)
      .map((i) => ({
        index: i,
        height: this.heights[i]!,
        prominence: this.heights[i]! - this.lowest.get(i)!,
      }));
  }
}

/** Neighbours on a line of so many points. */
export function lineNeighbours(count: number): (index: number) => number[] {
  return (index) => [index - 1, index + 1].filter((i) => i >= 0 && i < count);
}

/** The up to eight neighbours on a grid kept row by row. */
export function gridNeighbours(columns: number, rows: number): (index: number) => number[] {
  return (index) => {
    const [column, row] = [index % columns, Math.floor(index / columns)];
    return [-1, 0, 1].flatMap((down) =>
      [-1, 0, 1].flatMap((right) => {
        const [c, r] = [column + right, row + down];
        const isBeside = (right !== 0 || down !== 0) && c >= 0 && c < columns && r >= 0 && r < rows;
        return isBeside ? [r * columns + c] : [];
      }),
    );
  };
}
