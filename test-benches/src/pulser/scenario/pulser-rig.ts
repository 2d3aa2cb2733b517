import type { RigInput, TcpPlace } from '../../kit/scenario-input.js';

type ChannelInput = RigInput['channels'][number];

const wire = { connection: 'laser' } as const;
const percent = { type: 'u16', scale: 0.01 } as const;
const word = (table: string, address: number, more: object = {}) => ({ unit: 1, table, address, ...more });
const bit = (address: number) => word('discrete-input', address, { type: 'bit' });
const flagDisplay = { min: 0, max: 1, decimals: 0 };

/**
 * Pulser 1 of the Brackwater Test Station: a Q-switched laser that shows each of its pulses. All times of its
 * documents are real seconds; the bench runs five times as fast as they say.
 */
export function pulserRig({ host, port }: TcpPlace): RigInput {
  return {
    id: 'pulser-1',
    title: 'Pulser 1',
    description:
      'Pulsed laser of the Brackwater Test Station, simulated. With more drive its energy goes on rising while the pulse breaks in two: only the trace of the pulse tells.',
    periodMs: 100,
    connections: [
      {
        id: 'laser',
        title: 'Laser controller',
        adapter: 'modbus-tcp',
        configuration: { host, port, timeoutMs: 500 },
      },
    ],
    channels: [...actuators, ...sensors, ...derived],
  };
}

const actuators: ChannelInput[] = [
  actuator('drive', 'Lamp drive', '%', { min: 0, max: 100, decimals: 2 }, 0, percent),
  actuator('delay', 'Switch delay', 'µs', { min: 0, max: 700, decimals: 1 }, 1, { type: 'u16', scale: 0.1 }),
  actuator('heartbeat', 'Heartbeat', '', { min: 0, max: 65_535, decimals: 0 }, 2, { type: 'u16' }),
];

const sensors: ChannelInput[] = [
  sensor(
    'driveActual',
    'Drive of the supply',
    '%',
    { min: 0, max: 100, decimals: 2 },
    word('input-register', 0, percent),
  ),
  sensor(
    'energy',
    'Pulse energy',
    'mJ',
    { min: 0, max: 200, decimals: 1 },
    word('input-register', 1, { type: 'f32', wordOrder: 'big' }),
  ),
  {
    kind: 'trace',
    id: 'pulse',
    title: 'Pulse',
    unit: 'kW',
    display: { min: 0, max: 1600, decimals: 0 },
    ...wire,
    address: word('input-register', 1000, { type: 'i16', scale: 0.1, points: 512 }),
    axis: { title: 'Time since the switch opens', unit: 'ns', from: 10, step: 10 },
  },
  sensor('laserOn', 'Laser on', '', flagDisplay, bit(0)),
  sensor('protectionTrip', 'Protection of the optics', '', flagDisplay, bit(1)),
  sensor('watchdogFlag', 'Watchdog of the laser', '', flagDisplay, bit(2)),
];

/** Energy about the peak and beside it; 1 kW for 1 ns is 1 µJ. */
const derived: ChannelInput[] = [
  energyChannel(
    'mainEnergy',
    'Energy of the main pulse',
    // Where there is no pulse the peak is one of noise, which may stand at an end of the axis.
    'area(pulse, max(peakAt(pulse) - weight(200), weight(10)), min(peakAt(pulse) + weight(200), weight(5120))) * weight(0.001)',
  ),
  energyChannel('besideEnergy', 'Energy beside it', 'area(pulse) * weight(0.001) - mainEnergy'),
  energyChannel('cleanEnergy', 'Clean energy', 'mainEnergy - besideEnergy'),
];

function energyChannel(id: string, title: string, expression: string): ChannelInput {
  return { kind: 'derived', id, title, unit: 'mJ', display: { min: 0, max: 200, decimals: 1 }, expression };
}

function actuator(
  id: string,
  title: string,
  unit: string,
  display: ChannelInput['display'],
  address: number,
  more: object,
): ChannelInput {
  return {
    kind: 'actuator',
    id,
    title,
    unit,
    display,
    ...wire,
    address: word('holding-register', address, more),
  };
}

function sensor(
  id: string,
  title: string,
  unit: string,
  display: ChannelInput['display'],
  address: object,
): ChannelInput {
  return { kind: 'sensor', id, title, unit, display, ...wire, address: { ...address } };
}
