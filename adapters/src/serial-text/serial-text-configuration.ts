import type { SerialPortSettings } from '../serial/serial-port.schema.js';
import type { ChecksumKind } from './checksum.js';

export const instrumentProfileIds = ['none', 'ieee-488-2', 'scpi-meter', 'nmea-0183'] as const;
export type InstrumentProfileId = (typeof instrumentProfileIds)[number];

/** How to reach an ASCII instrument and how it speaks. Texts hold escapes (`\r`), patterns are of `fitsPattern`. */
export interface SerialTextConfiguration extends Required<SerialPortSettings> {
  profile: InstrumentProfileId;
  rs485: 'none' | 'automatic' | 'rts-high' | 'rts-low';
  rs485BeforeMs: number;
  rs485AfterMs: number;
  requestTerminator: string;
  replyTerminator: string;
  characters: 'ascii' | 'latin1';
  hasEcho: boolean;
  commandGapMs: number;
  replyTimeoutMs: number;
  timeoutMs: number;
  openTimeoutMs: number;
  resyncMs: number;
  silencesUntilLost: number;
  mostReplyChars: number;
  checksum: ChecksumKind;
  checksumSeparator: string;
  checksumSkips: number;
  checksumOn: 'both' | 'replies' | 'requests';
  unsolicited: string[];
  refusals: string[];
  initialCommands: string[];
  identificationQuery: string;
  identification: string;
  errorQuery: string;
  errorForm: 'queue' | 'event-status';
  noError: string[];
  hasErrorCheckAfterWrite: boolean;
  errorCheckScans: number;
}

/** What a field left out is where the profile does not say either; `resyncMs` follows the reply timeout. */
export const serialTextDefaults: Omit<SerialTextConfiguration, 'path' | 'resyncMs'> = {
  profile: 'none',
  baudRate: 9600,
  dataBits: 8,
  parity: 'none',
  stopBits: 1,
  flowControl: 'none',
  rs485: 'none',
  rs485BeforeMs: 0,
  rs485AfterMs: 0,
  requestTerminator: '\\n',
  replyTerminator: '\\n',
  characters: 'ascii',
  hasEcho: false,
  commandGapMs: 0,
  replyTimeoutMs: 500,
  timeoutMs: 2000,
  openTimeoutMs: 5000,
  silencesUntilLost: 5,
  mostReplyChars: 65_536,
  checksum: 'none',
  checksumSeparator: '',
  checksumSkips: 0,
  checksumOn: 'both',
  unsolicited: [],
  refusals: [],
  initialCommands: [],
  identificationQuery: '*IDN?',
  identification: '',
  errorQuery: '',
  errorForm: 'queue',
  noError: ['0', '0,*', '+0', '+0,*'],
  hasErrorCheckAfterWrite: true,
  errorCheckScans: 0,
};
