import type { LinePlace, RigInput } from '../../kit/scenario-input.js';

type ChannelInput = RigInput['channels'][number];

const wire = { connection: 'converter' } as const;

/** All instruments in one line and all that the controller knows of itself in another: two requests a scan. */
const instruments = 'MEAS:VOLT?;MEAS:CURR?;MEAS:POW?;MEAS:IRR?;MEAS:TEMP?';
const controller = 'SOUR:VOLT?;SYST:HEAR?;OUTP:STAT?;SYST:WATC?';
const measured = (field: number) => ({ query: instruments, separator: ';', field });
const known = (field: number) => ({ query: controller, separator: ';', field });

/**
 * String 1 of the Brackwater Test Station: six photovoltaic modules on a converter, all times in seconds of the
 * bench at its own speed.
 */
export function stringRig({ path }: LinePlace): RigInput {
  return {
    id: 'string-1',
    title: 'String 1',
    description:
      'Six photovoltaic modules on a DC/DC converter of the Brackwater Test Station, simulated. The best voltage moves with light and heat; in partial shade there are two or three.',
    periodMs: 50,
    connections: [
      {
        id: 'converter',
        title: 'Converter of the string',
        adapter: 'serial-text',
        configuration: { path, profile: 'scpi-meter', baudRate: 115_200, replyTimeoutMs: 400, resyncMs: 200 },
      },
    ],
    channels,
  };
}

const channels: ChannelInput[] = [
  {
    kind: 'actuator',
    id: 'voltageSetpoint',
    title: 'String voltage, set',
    unit: 'V',
    display: { min: 0, max: 200, decimals: 2 },
    ...wire,
    address: { ...known(0), write: 'SOUR:VOLT {value}', decimals: 2, min: 10, max: 200 },
  },
  {
    kind: 'actuator',
    id: 'heartbeat',
    title: 'Heartbeat',
    unit: '',
    display: { min: 0, max: 65_535, decimals: 0 },
    ...wire,
    address: { ...known(1), write: 'SYST:HEAR {value}', decimals: 0, min: 0, max: 65_535 },
  },
  sensor('voltage', 'String voltage', 'V', { min: 0, max: 220, decimals: 2 }, measured(0)),
  sensor('current', 'String current', 'A', { min: 0, max: 10, decimals: 3 }, measured(1)),
  sensor('power', 'String power', 'W', { min: 0, max: 1300, decimals: 1 }, measured(2)),
  sensor('irradiance', 'Irradiance', 'W/m²', { min: 0, max: 1200, decimals: 0 }, measured(3)),
  sensor('cellTemp', 'Cell temperature', '°C', { min: 0, max: 80, decimals: 1 }, measured(4)),
  sensor('running', 'Converter runs', '', { min: 0, max: 1, decimals: 0 }, known(2)),
  sensor('watchdogFlag', 'Watchdog of the converter', '', { min: 0, max: 1, decimals: 0 }, known(3)),
];

function sensor(
  id: string,
  title: string,
  unit: string,
  display: ChannelInput['display'],
  address: Record<string, unknown>,
): ChannelInput {
  return { kind: 'sensor', id, title, unit, display, ...wire, address };
}
