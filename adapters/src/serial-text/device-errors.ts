import { fitsAny } from './pattern.js';
import { showText } from './escaped-text.js';
import type { SerialTextConfiguration } from './serial-text-configuration.js';

/**
 * Bits of the event status register.
 *
 * @source IEEE 488.2, 11.5.1
 */
export const eventStatusBits = {
  operationComplete: 1,
  requestControl: 2,
  queryError: 4,
  deviceError: 8,
  executionError: 16,
  commandError: 32,
  userRequest: 64,
  powerOn: 128,
} as const;

const errorBits: readonly (readonly [bit: number, name: string])[] = [
  [eventStatusBits.commandError, 'command error'],
  [eventStatusBits.executionError, 'execution error'],
  [eventStatusBits.deviceError, 'device-dependent error'],
  [eventStatusBits.queryError, 'query error'],
];

/**
 * Texts of common entries of an error queue, for devices that send the number alone.
 *
 * @source SCPI-1999, volume 2, 21.8
 */
const queueTexts: Readonly<Record<number, string>> = {
  [-100]: 'Command error',
  [-102]: 'Syntax error',
  [-108]: 'Parameter not allowed',
  [-109]: 'Missing parameter',
  [-113]: 'Undefined header',
  [-200]: 'Execution error',
  [-221]: 'Settings conflict',
  [-222]: 'Data out of range',
  [-224]: 'Illegal parameter value',
  [-350]: 'Queue overflow',
};

/**
 * What the reply to an error query says: null for no error, else the device's own text.
 *
 * @example
 * deviceErrorOf('-222,"Data out of range"', configuration) // '-222,"Data out of range"'
 * deviceErrorOf('32', { ...configuration, errorForm: 'event-status' }) // 'event status 32 (command error)'
 */
export function deviceErrorOf(
  reply: string,
  { errorForm, noError }: Pick<SerialTextConfiguration, 'errorForm' | 'noError'>,
): string | null {
  if (errorForm === 'event-status') return eventStatusError(reply);
  if (fitsAny(reply, noError)) return null;
  const known = /^[+-]?\d+$/.test(reply) ? queueTexts[Number(reply)] : undefined;
  return known === undefined ? showText(reply) : `${reply},"${known}"`;
}

/** The register is cleared by being read, so each error is reported once. */
function eventStatusError(reply: string): string | null {
  if (!/^\+?\d{1,3}$/.test(reply)) return `"${showText(reply)}", which is no event status`;
  const status = Number(reply);
  const names = errorBits.filter(([bit]) => status & bit).map(([, name]) => name);
  return names.length === 0 ? null : `event status ${status} (${names.join(', ')})`;
}
