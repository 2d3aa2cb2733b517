/**
 * The names that somebody who wrote `name` most likely meant, best first.
 *
 * @returns at most three names of `known`; empty where none is near
 * @example
 * closestNames('airtrim', ['airTrim', 'o2']) // ['airTrim']
 */
export function closestNames(name: string, known: Iterable<string>): string[] {
  const wanted = name.toLowerCase();
  const farthest = Math.max(2, Math.floor(name.length / 2));
  return [...known]
    .map((candidate) => ({ candidate, distance: distanceTo(wanted, candidate.toLowerCase()) }))
    .filter(({ distance }) => distance <= farthest)
    .sort((a, b) => a.distance - b.distance || a.candidate.localeCompare(b.candidate))
    .slice(0, 3)
    .map(({ candidate }) => candidate);
}

/** A name that ends in what was written lacks only its front (`best.airTrim` for `survey.best.airTrim`). */
function distanceTo(wanted: string, candidate: string): number {
  return candidate.endsWith(`.${wanted}`) ? 1 : editDistance(wanted, candidate);
}

/** Edits (insert, delete, replace) from one text to the other; V. I. Levenshtein (1966). */
function editDistance(a: string, b: string): number {
  let row = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i += 1) {
    const next = [i];
    for (let j = 1; j <= b.length; j += 1) {
      const replaced = (row[j - 1] ?? 0) + (a[i - 1] === b[j - 1] ? 0 : 1);
      next.push(Math.min(replaced, (row[j] ?? 0) + 1, (next[j - 1] ?? 0) + 1));
    }
    row = next;
  }
  return row[b.length] ?? 0;
}
