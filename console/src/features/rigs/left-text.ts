const two = (value: number): string => String(value).padStart(2, '0');

/**
 * How long it is until a moment.
 *
 * @example
 * leftText('2026-03-01T10:01:05.000Z', Date.parse('2026-03-01T10:00:00.000Z')) // '1:05 left'
 */
export function leftText(untilAt: string, nowMs: number): string {
  const leftS = Math.ceil((Date.parse(untilAt) - nowMs) / 1000);
  if (!(leftS > 0)) return 'about to end';
  const [hours, minutes] = [Math.floor(leftS / 3600), Math.floor(leftS / 60) % 60];
  const clock = hours > 0 ? `${hours}:${two(minutes)}` : String(minutes);
  return `${clock}:${two(leftS % 60)} left`;
}
