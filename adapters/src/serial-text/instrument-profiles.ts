import type { SerialTextAddressInput } from './serial-text-address.schema.js';
import type { InstrumentProfileId, SerialTextConfiguration } from './serial-text-configuration.js';

/** One channel as a profile suggests it. */
export interface ProfileChannel {
  readonly title: string;
  readonly unit: string;
  readonly address: SerialTextAddressInput;
}

/** A kind of instrument as data: settings for the fields that a connection leaves out, and channels to begin with. */
export interface InstrumentProfile {
  readonly id: InstrumentProfileId;
  readonly title: string;
  readonly configuration: Partial<Omit<SerialTextConfiguration, 'path' | 'profile'>>;
  readonly channels: readonly ProfileChannel[];
}

/** A sentence of any talker, from its formatter: `$GPGGA,…` and `$GNGGA,…` alike. */
const sentence = (formatter: string): string => `$??${formatter},*`;

const sentenceField = (formatter: string, field: number): SerialTextAddressInput => ({
  stream: sentence(formatter),
  field,
  specials: [''],
});

/**
 * The profiles that ship. IEEE 488.2 common commands after clause 10 of that standard; error queue and numbers after
 * SCPI-1999; sentences after NMEA 0183 (field 0 is the sentence's own name).
 */
export const instrumentProfiles: readonly InstrumentProfile[] = [
  { id: 'none', title: 'None: everything as given', configuration: {}, channels: [] },
  {
    id: 'ieee-488-2',
    title: 'IEEE 488.2 common commands',
    configuration: {
      initialCommands: ['*CLS'],
      errorQuery: '*ESR?',
      errorForm: 'event-status',
    },
    channels: [
      { title: 'Status byte', unit: '', address: { query: '*STB?' } },
      { title: 'Self test', unit: '', address: { query: '*TST?' } },
      {
        title: 'Service request enable',
        unit: '',
        address: { query: '*SRE?', write: '*SRE {value}', max: 255 },
      },
    ],
  },
  {
    id: 'scpi-meter',
    title: 'Measuring instrument with an error queue (SCPI style)',
    configuration: {
      initialCommands: ['*CLS'],
      errorQuery: 'SYST:ERR?',
      errorForm: 'queue',
    },
    channels: [
      { title: 'Voltage', unit: 'V', address: { query: 'MEAS:VOLT?' } },
      { title: 'Current', unit: 'A', address: { query: 'MEAS:CURR?' } },
      {
        title: 'Voltage setting',
        unit: 'V',
        address: { query: 'SOUR:VOLT?', write: 'SOUR:VOLT {value}', decimals: 3, min: 0, max: 30 },
      },
    ],
  },
  {
    id: 'nmea-0183',
    title: 'Talker of NMEA 0183 sentences',
    configuration: {
      baudRate: 4800,
      requestTerminator: '\\r\\n',
      replyTerminator: '\\r\\n',
      checksum: 'nmea-xor',
      unsolicited: ['$*', '!*'],
    },
    channels: [
      {
        title: 'Latitude',
        unit: '°',
        address: { ...sentenceField('GGA', 2), notation: 'degrees-minutes', signField: 3 },
      },
      {
        title: 'Longitude',
        unit: '°',
        address: { ...sentenceField('GGA', 4), notation: 'degrees-minutes', signField: 5 },
      },
      { title: 'Altitude', unit: 'm', address: sentenceField('GGA', 9) },
      { title: 'Satellites in use', unit: '', address: sentenceField('GGA', 7) },
      // One knot is 1852 m in an hour.
      {
        title: 'Speed over ground',
        unit: 'm/s',
        address: { ...sentenceField('RMC', 7), scale: 1852 / 3600 },
      },
      { title: 'Course over ground', unit: '°', address: sentenceField('RMC', 8) },
      {
        title: 'Position is valid',
        unit: '',
        address: { ...sentenceField('RMC', 2), words: { A: 1, V: 0 } },
      },
    ],
  },
];

export function instrumentProfile(id: InstrumentProfileId): InstrumentProfile {
  const profile = instrumentProfiles.find((candidate) => candidate.id === id);
  if (!profile) throw new RangeError(`there is no profile "${id}"`);
  return profile;
}
