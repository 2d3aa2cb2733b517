import type { KeyboardEvent } from 'react';

/** Enter and the arrows up and down go to the same column of the next row, as in a spreadsheet. */
export function moveAbout(event: KeyboardEvent<HTMLElement>): void {
  const { target, key, currentTarget } = event;
  if (!(target instanceof HTMLInputElement || target instanceof HTMLSelectElement)) return;
  // Arrows choose in a list of choices.
  const isText = target instanceof HTMLInputElement;
  const step = key === 'Enter' ? (event.shiftKey ? -1 : 1) : isText ? arrowStep(key) : 0;
  if (step === 0) return;
  const place = placeOf(target);
  if (!place) return;
  event.preventDefault();
  const cells = [...currentTarget.querySelectorAll<HTMLElement>(`[data-column="${place.column}"]`)];
  const at = cells.indexOf(target);
  const next = cells[at + step];
  next?.focus();
  if (next instanceof HTMLInputElement) next.select();
}

/** The cell that an event came from; null where it came from none. */
export function placeOf(target: EventTarget | null): { row: number; column: number } | null {
  if (!(target instanceof HTMLElement)) return null;
  const { row, column } = target.dataset;
  return row === undefined || column === undefined ? null : { row: Number(row), column: Number(column) };
}

function arrowStep(key: string): number {
  return key === 'ArrowDown' ? 1 : key === 'ArrowUp' ? -1 : 0;
}
