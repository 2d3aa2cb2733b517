import type { SeededRandom } from '../kit/seeded-random.js';

/** Irradiance of the string in full light, W/m², as a function of time; to be asked with times that do not fall. */
export type Irradiance = (tS: number) => number;

/** Corner of a course that is straight between corners. */
interface Corner {
  atS: number;
  irradiance: number;
}

/** One row of a ramp test: up and down between two levels with so many repetitions. */
export interface RampRow {
  /** W/m² per s. */
  slope: number;
  repetitions: number;
}

/** A ramp test: rows between two levels. */
export interface RampTest {
  low: number;
  high: number;
  rows: readonly RampRow[];
}

const rows = (...pairs: (readonly [slope: number, repetitions: number])[]): RampRow[] =>
  pairs.map(([slope, repetitions]) => ({ slope, repetitions }));

/** Tests of the dynamic efficiency. @source EN 50530:2010, annex B, tables B.2 and B.3 (from memory) */
export const rampTests = {
  'low-to-medium': {
    low: 100,
    high: 500,
    rows: rows(
      [0.5, 2],
      [1, 2],
      [2, 3],
      [3, 4],
      [5, 6],
      [7, 8],
      [10, 10],
      [14, 10],
      [20, 10],
      [30, 10],
      [50, 10],
    ),
  },
  'medium-to-high': {
    low: 300,
    high: 1000,
    rows: rows([10, 10], [14, 10], [20, 10], [30, 10], [50, 10], [100, 10]),
  },
} as const satisfies Record<string, RampTest>;

/** Time at the lower level before each row, s; and at either level within it. */
const rowSettlingS = 300;
const dwellS = 10;

function rampCorners({ low, high, rows }: RampTest): Corner[] {
  const corners: Corner[] = [{ atS: 0, irradiance: low }];
  let atS = 0;
  const go = (forS: number, irradiance: number) => corners.push({ atS: (atS += forS), irradiance });
  for (const { slope, repetitions } of rows) {
    const rampS = (high - low) / slope;
    go(rowSettlingS, low);
    for (let i = 0; i < repetitions; i += 1) {
      go(rampS, high);
      go(dwellS, high);
      go(rampS, low);
      go(dwellS, low);
    }
  }
  return corners;
}

/** Length of a ramp test, s. @example rampTestS(rampTests['low-to-medium']) // 15939.05 */
export function rampTestS(test: RampTest): number {
  return rampCorners(test).at(-1)?.atS ?? 0;
}

/** Ramps up and down after EN 50530; stays at the lower level at the end. */
export function ramps(test: RampTest): Irradiance {
  const corners = rampCorners(test);
  let next = 0;
  return follow(() => corners[next++] ?? { atS: Infinity, irradiance: test.low });
}

/** Broken cloud, chosen here: how bright, how long and with what edges, each even between two ends. */
const clouds = {
  clear: { irradiance: [850, 1050], meanS: 9, leastS: 3 },
  covered: { irradiance: [120, 400], meanS: 7, leastS: 2 },
  edgeS: [0.7, 3],
} as const;

/** Clear and covered in turns of random length with edges of a few seconds. */
export function brokenCloud(random: SeededRandom): Irradiance {
  const between = ([from, to]: readonly [number, number]) => from + (to - from) * random.uniform();
  let atS = 0;
  let isClear = true;
  let isEdge = true;
  let irradiance = between(clouds.clear.irradiance);
  return follow(() => {
    isEdge = !isEdge;
    const { meanS, leastS } = isClear ? clouds.clear : clouds.covered;
    if (isEdge) {
      isClear = !isClear;
      atS += between(clouds.edgeS);
      irradiance = between(isClear ? clouds.clear.irradiance : clouds.covered.irradiance);
    } else if (atS === 0) atS = leastS;
    else atS += leastS - (meanS - leastS) * Math.log(1 - random.uniform());
    return { atS, irradiance };
  });
}

export const steadyLight =
  (irradiance: number): Irradiance =>
  () =>
    irradiance;

/** Straight lines from corner to corner. */
function follow(nextCorner: () => Corner): Irradiance {
  let from = nextCorner();
  let to = nextCorner();
  return (tS) => {
    while (tS >= to.atS) {
      from = to;
      to = nextCorner();
    }
    const share = to.atS === Infinity ? 0 : Math.max(0, tS - from.atS) / (to.atS - from.atS);
    return from.irradiance + share * (to.irradiance - from.irradiance);
  };
}
