import { z } from 'zod';
import { instrumentProfile } from './instrument-profiles.js';
import { type SerialTextConfiguration, serialTextDefaults } from './serial-text-configuration.js';
import { deviceFields, portFields, textFields, timeFields } from './serial-text-fields.js';

/** What may be given: everything but the path has a default, of the profile or of the adapter. */
const givenSchema = z.strictObject({ ...portFields, ...textFields, ...timeFields, ...deviceFields });
type Given = z.infer<typeof givenSchema>;

function resolve(given: Given): SerialTextConfiguration {
  const present = Object.fromEntries(Object.entries(given).filter(([, value]) => value !== undefined));
  const profile = instrumentProfile(given.profile ?? 'none').configuration;
  const merged = { ...serialTextDefaults, ...profile, ...present, path: given.path };
  return { resyncMs: merged.replyTimeoutMs, ...merged };
}

export const serialTextConfigurationSchema: z.ZodType<SerialTextConfiguration> = givenSchema
  .transform(resolve)
  .superRefine((value, context) => {
    const refuse = (field: keyof SerialTextConfiguration, message: string): void => {
      context.addIssue({ code: 'custom', path: [field], message });
    };
    if (value.rs485.startsWith('rts') && value.flowControl === 'rts-cts') {
      refuse('flowControl', 'RTS cannot both turn the line round and hold the device back: choose one.');
    }
    if (value.characters === 'latin1' && value.dataBits < 8) {
      refuse('characters', 'Characters of latin1 need 8 data bits.');
    }
    if (value.timeoutMs < value.replyTimeoutMs) {
      refuse('timeoutMs', 'Reading all channels cannot take less time than one reply: raise it.');
    }
  });
