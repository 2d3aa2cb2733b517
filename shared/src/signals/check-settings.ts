import { DomainError, type FieldFault } from '../errors/domain-error.js';

/** A condition that a setting or a series must meet, with what to tell whoever gave it. */
export type SettingCondition = readonly [isMet: boolean, field: string, message: string];

/**
 * Checks the settings of an analysis or filter once, when it is set up; all faults are listed together.
 *
 * @throws analysis.invalid-input with one detail per condition that is not met
 */
export function checkSettings(...conditions: readonly SettingCondition[]): void {
  const faults: FieldFault[] = conditions
    .filter(([isMet]) => !isMet)
    .map(([, field, message]) => ({ field, message }));
  if (faults.length === 0) return;
  const text = faults.map(({ field, message }) => `${field}: ${message}`).join(' ');
  throw new DomainError('analysis.invalid-input', text, faults);
}

/**
 * @param values series in any unit
 * @param atLeast fewest values that the analysis can work with
 * @throws analysis.invalid-input where a value is no finite number
 * @throws analysis.too-little-data where there are fewer values
 */
export function checkSeries(values: ArrayLike<number>, field: string, atLeast = 1): void {
  for (let i = 0; i < values.length; i += 1) {
    if (Number.isFinite(values[i])) continue;
    checkSettings([false, `${field}[${i}]`, 'is no finite number; leave bad samples out first.']);
  }
  if (values.length >= atLeast) return;
  const message = `has ${values.length} values; at least ${atLeast} are needed.`;
  throw new DomainError('analysis.too-little-data', `${field} ${message}`, [{ field, message }]);
}
