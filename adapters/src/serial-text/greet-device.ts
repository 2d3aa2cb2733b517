import { DomainError } from '@cresthold/shared';
import { plainText, showText } from './escaped-text.js';
import { ErrorCheck } from './error-check.js';
import { fitsPattern } from './pattern.js';
import type { SerialTextConfiguration } from './serial-text-configuration.js';
import type { TextLink } from './text-link.js';

/**
 * What is done each time the port has been opened: direction of the line, identification, initial commands, and what
 * errors these caused.
 *
 * @returns why the device cannot be used, or null
 */
export async function greetDevice(
  link: TextLink,
  settings: SerialTextConfiguration,
  deadlineMs: number,
): Promise<DomainError | null> {
  return (
    (await link.prepare()) ??
    (await identify(link, settings, deadlineMs)) ??
    (await initialise(link, settings, deadlineMs)) ??
    link.lost
  );
}

async function identify(
  link: TextLink,
  { path, identification, identificationQuery }: SerialTextConfiguration,
  deadlineMs: number,
): Promise<DomainError | null> {
  if (identification === '') return null;
  const command = plainText(identificationQuery);
  const reply = await link.exchange({ command, expectation: { kind: 'line' } }, deadlineMs);
  if (reply instanceof DomainError) return reply;
  if (typeof reply === 'string' && fitsPattern(reply, identification)) return null;
  const message =
    `${path}: the device says that it is "${showText(String(reply))}", which does not fit "${identification}": ` +
    'check which device is on this port.';
  return new DomainError('adapter.misconfigured', message, [{ field: 'identification', message }]);
}

async function initialise(
  link: TextLink,
  settings: SerialTextConfiguration,
  deadlineMs: number,
): Promise<DomainError | null> {
  const errors = new ErrorCheck(link, settings);
  if (errors.isPossible) {
    // What went wrong before we came is nobody's fault here.
    const fault = await errors.run('errors of earlier', deadlineMs);
    if (fault && fault.code !== 'adapter.refused') return fault;
  }
  for (const template of settings.initialCommands) {
    const fault = await sendInitial(link, plainText(template), deadlineMs);
    if (fault) return fault;
  }
  return errors.isPossible ? errors.run('initial commands', deadlineMs) : null;
}

async function sendInitial(link: TextLink, command: string, deadlineMs: number): Promise<DomainError | null> {
  const expectation = command.trimEnd().endsWith('?') ? ({ kind: 'line' } as const) : null;
  const reply = await link.exchange({ command, expectation }, deadlineMs);
  return reply instanceof DomainError ? reply : null;
}
