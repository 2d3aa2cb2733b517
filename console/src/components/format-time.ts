const two = (value: number) => String(value).padStart(2, '0');

/** Date and time of day in the viewer's own zone: `2026-03-01 14:05`; the text itself where it is no time. */
export function formatMoment(iso: string): string {
  const at = new Date(iso);
  if (Number.isNaN(at.getTime())) return iso;
  const day = `${at.getFullYear()}-${two(at.getMonth() + 1)}-${two(at.getDate())}`;
  return `${day} ${two(at.getHours())}:${two(at.getMinutes())}`;
}

/** Date and time to the second: `2026-03-01 14:05:09`. */
export function formatInstant(iso: string): string {
  return Number.isNaN(Date.parse(iso)) ? iso : `${formatMoment(iso).slice(0, 10)} ${formatClock(iso)}`;
}

/** Time of day in the viewer's own zone: `14:05:09`. */
export function formatClock(iso: string): string {
  const at = new Date(iso);
  if (Number.isNaN(at.getTime())) return iso;
  return `${two(at.getHours())}:${two(at.getMinutes())}:${two(at.getSeconds())}`;
}
