import { z } from 'zod';
import { serialPortFields } from '../serial/serial-port.schema.js';
import { checksumKinds } from './checksum.js';
import { instrumentProfileIds, serialTextDefaults } from './serial-text-configuration.js';
import {
  commandSchema,
  escapedTextSchema,
  optionalPatternSchema,
  patternListSchema,
  terminatorSchema,
} from './text-fields.js';

const milliseconds = (most: number): z.ZodNumber => z.number().min(0).max(most);

/** The field left out is what the profile says, or else this. */
function orDefault<T extends z.ZodType>(
  schema: T,
  field: keyof typeof serialTextDefaults,
  title: string,
  help: string,
) {
  const value = serialTextDefaults[field];
  const shown = Array.isArray(value) ? value.join(' or ') : String(value);
  const left = shown === '' ? 'none' : shown;
  return schema
    .optional()
    .meta({ title, description: `${help} Left out: as the profile says, else ${left}.` });
}

export const portFields = {
  path: serialPortFields.path,
  profile: z.enum(instrumentProfileIds).optional().meta({
    title: 'Profile',
    description: 'Settings of a kind of instrument, for all fields that are left out. Left out: none.',
  }),
  baudRate: orDefault(serialPortFields.baudRate, 'baudRate', 'Baud rate', 'Bits per second.'),
  dataBits: orDefault(serialPortFields.dataBits, 'dataBits', 'Data bits', 'Bits of a character.'),
  parity: orDefault(serialPortFields.parity, 'parity', 'Parity', 'Check bit of a character.'),
  stopBits: orDefault(serialPortFields.stopBits, 'stopBits', 'Stop bits', 'End of a character.'),
  flowControl: orDefault(
    serialPortFields.flowControl,
    'flowControl',
    'Flow control',
    'How either end makes the other wait: by the lines RTS and CTS, or by the characters XON and XOFF.',
  ),
  rs485: orDefault(
    z.enum(['none', 'automatic', 'rts-high', 'rts-low']),
    'rs485',
    'RS-485 direction',
    'What turns a two-wire line round: "automatic" where the converter does it by itself, "rts-high" or "rts-low" ' +
      'where the line RTS must be on or off while sending.',
  ),
  rs485BeforeMs: orDefault(
    milliseconds(1000),
    'rs485BeforeMs',
    'RS-485 pause before sending (ms)',
    'Pause between the last reply, or the change of direction, and the next command.',
  ),
  rs485AfterMs: orDefault(
    milliseconds(1000),
    'rs485AfterMs',
    'RS-485 pause after sending (ms)',
    'How long RTS is held after the last character; raise it where commands arrive cut off.',
  ),
};

export const textFields = {
  requestTerminator: orDefault(
    escapedTextSchema(20),
    'requestTerminator',
    'Command terminator',
    'What ends a command: \\n for LF, \\r for CR, \\r\\n for both.',
  ),
  replyTerminator: orDefault(terminatorSchema, 'replyTerminator', 'Reply terminator', 'What ends a reply.'),
  characters: orDefault(
    z.enum(['ascii', 'latin1']),
    'characters',
    'Character set',
    'With "ascii" a reply with any other character is corrupt, which finds wrong line settings.',
  ),
  hasEcho: orDefault(
    z.boolean(),
    'hasEcho',
    'Echo',
    'Whether the device, or a two-wire line, sends each command back; it is compared and dropped.',
  ),
  checksum: orDefault(
    z.enum(checksumKinds),
    'checksum',
    'Checksum',
    'Kind of the hexadecimal checksum at the end of a line; "nmea-xor" has the form $…*hh.',
  ),
  checksumSeparator: orDefault(
    escapedTextSchema(4),
    'checksumSeparator',
    'Checksum separator',
    'Text between the line and its checksum.',
  ),
  checksumSkips: orDefault(
    z.int().min(0).max(20),
    'checksumSkips',
    'Checksum skips',
    'Characters at the beginning of a line that the checksum does not cover.',
  ),
  checksumOn: orDefault(
    z.enum(['both', 'replies', 'requests']),
    'checksumOn',
    'Checksum on',
    'Which lines carry the checksum: it is verified on replies and appended to commands.',
  ),
  unsolicited: orDefault(
    patternListSchema,
    'unsolicited',
    'Unsolicited lines',
    'Patterns of lines that the device sends by itself: never taken for a reply. Channels can read them by "stream".',
  ),
  refusals: orDefault(
    patternListSchema,
    'refusals',
    'Refusals',
    'Patterns of replies by which the device says that it will not do a command, e.g. ERR*.',
  ),
};

export const timeFields = {
  commandGapMs: orDefault(
    milliseconds(10_000),
    'commandGapMs',
    'Pause between commands (ms)',
    'Least time from one command to the next, for slow devices.',
  ),
  replyTimeoutMs: orDefault(
    z.number().min(5).max(60_000),
    'replyTimeoutMs',
    'Reply timeout (ms)',
    'Longest wait for a reply to begin, and between its characters.',
  ),
  timeoutMs: orDefault(
    z.number().min(10).max(600_000),
    'timeoutMs',
    'Call timeout (ms)',
    'Longest time for reading, or writing, all channels of the connection once.',
  ),
  openTimeoutMs: orDefault(
    z.number().min(10).max(600_000),
    'openTimeoutMs',
    'Opening timeout (ms)',
    'Longest time for opening, identification and the initial commands together.',
  ),
  resyncMs: milliseconds(60_000)
    .optional()
    .meta({
      title: 'Silence after a missed reply (ms)',
      description:
        'After a missed or corrupt reply the line must be silent this long before the next command, so that a late ' +
        'reply is never taken for the next one. Left out: the reply timeout.',
    }),
  silencesUntilLost: orDefault(
    z.int().min(1).max(1000),
    'silencesUntilLost',
    'Silences until lost',
    'Queries in a row without any reply after which the connection is opened anew.',
  ),
  mostReplyChars: orDefault(
    z.int().min(16).max(4_000_000),
    'mostReplyChars',
    'Longest reply',
    'Characters; longer replies are dropped as noise.',
  ),
};

export const deviceFields = {
  initialCommands: orDefault(
    z.array(commandSchema).max(50),
    'initialCommands',
    'Initial commands',
    'Sent in order each time the connection opens; the reply to one that ends in ? is dropped.',
  ),
  identificationQuery: orDefault(
    commandSchema,
    'identificationQuery',
    'Identification query',
    'Command that asks the device what it is; used where an identification is given.',
  ),
  identification: orDefault(
    optionalPatternSchema,
    'identification',
    'Identification',
    'Pattern that the reply must fit, e.g. *,MODEL 12,*. It also brings the line back into step after a missed reply.',
  ),
  errorQuery: orDefault(
    commandSchema,
    'errorQuery',
    'Error query',
    'Command that asks the device for its oldest error, e.g. SYST:ERR?.',
  ),
  errorForm: orDefault(
    z.enum(['queue', 'event-status']),
    'errorForm',
    'Error form',
    'Whether the reply is one entry of a queue, or the event status register of IEEE 488.2 (*ESR?).',
  ),
  noError: orDefault(patternListSchema, 'noError', 'No error', 'Patterns of the reply that says: no error.'),
  hasErrorCheckAfterWrite: orDefault(
    z.boolean(),
    'hasErrorCheckAfterWrite',
    'Errors after each write',
    'Whether the error query follows each write, so that an error is named at the write that caused it.',
  ),
  errorCheckScans: orDefault(
    z.int().min(0).max(100_000),
    'errorCheckScans',
    'Errors every … scans',
    'Asks for errors after every so many reads; 0 never.',
  ),
};
