/**
 * Whether a version meets a range of the form `^x.y.z` (or an exact `x.y.z`).
 *
 * @source Semantic Versioning 2.0.0, 4 and 8: below 1.0.0 a new minor version may break
 * @example
 * meetsRange('1.4.0', '^1.2.0') // true
 * meetsRange('2.0.0', '^1.2.0') // false
 * meetsRange('0.3.0', '^0.2.0') // false
 */
export function meetsRange(version: string, range: string): boolean {
  const have = parseVersion(version);
  const want = parseVersion(range.startsWith('^') ? range.slice(1) : range);
  if (!have || !want) return false;
  if (!range.startsWith('^')) return compare(have, want) === 0;
  if (compare(have, want) < 0) return false;
  const firstSignificant = want.findIndex((part) => part !== 0);
  const fixed = firstSignificant < 0 ? 2 : firstSignificant;
  return want.every((part, index) => index > fixed || part === have[index]);
}

type Version = readonly [major: number, minor: number, patch: number];

function parseVersion(text: string): Version | null {
  const match = /^(\d+)\.(\d+)\.(\d+)$/.exec(text);
  return match ? [Number(match[1]), Number(match[2]), Number(match[3])] : null;
}

function compare(a: Version, b: Version): number {
  return a[0] - b[0] || a[1] - b[1] || a[2] - b[2];
}
