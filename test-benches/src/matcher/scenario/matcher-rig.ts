import type { RigInput, TcpPlace } from '../../kit/scenario-input.js';

const wire = { connection: 'network' } as const;
const percent = { type: 'u16', scale: 0.01 } as const;
const word = (table: string, address: number, more: object = {}) => ({ unit: 1, table, address, ...more });
const float = { type: 'f32', wordOrder: 'big' } as const;
const bit = (address: number) => word('discrete-input', address, { type: 'bit' });
const flagDisplay = { min: 0, max: 1, decimals: 0 };

/**
 * Matcher 1 of the Brackwater Test Station: generator, matching network and load. All times of its documents are
 * real seconds; the bench runs five times as fast as they say.
 */
export function matcherRig({ host, port }: TcpPlace): RigInput {
  return {
    id: 'matcher-1',
    title: 'Matcher 1',
    description:
      'Matching network of the Brackwater Test Station, simulated: two motor-driven capacitors between a generator and a load that wanders. Its best place lies in a narrow valley askew.',
    periodMs: 50,
    connections: [
      {
        id: 'network',
        title: 'Network controller',
        adapter: 'modbus-tcp',
        configuration: { host, port, timeoutMs: 500 },
      },
    ],
    channels: [...actuators, ...sensors, ...derived],
  };
}

type ChannelInput = RigInput['channels'][number];

const actuators: ChannelInput[] = [
  actuator('shunt', 'Shunt capacitor', '%', { min: 0, max: 100, decimals: 2 }, 0, percent),
  actuator('series', 'Series capacitor', '%', { min: 0, max: 100, decimals: 2 }, 1, percent),
  actuator('heartbeat', 'Heartbeat', '', { min: 0, max: 65_535, decimals: 0 }, 2, { type: 'u16' }),
];

const sensors: ChannelInput[] = [
  sensor('shuntPosition', 'Shunt position', '%', { min: 0, max: 100, decimals: 2 }, input(0, percent)),
  sensor('seriesPosition', 'Series position', '%', { min: 0, max: 100, decimals: 2 }, input(1, percent)),
  sensor('forward', 'Forward power', 'W', { min: 0, max: 1100, decimals: 1 }, input(2, float)),
  sensor('reflected', 'Reflected power', 'W', { min: 0, max: 300, decimals: 1 }, input(4, float)),
  sensor(
    'gammaMagnitude',
    'Reflection, magnitude',
    '',
    { min: 0, max: 1, decimals: 3 },
    input(6, { type: 'u16', scale: 0.0001 }),
  ),
  sensor(
    'gammaPhase',
    'Reflection, phase',
    '°',
    { min: -180, max: 180, decimals: 1 },
    input(7, { type: 'i16', scale: 0.1 }),
  ),
  sensor('rfOn', 'Generator on', '', flagDisplay, bit(0)),
  sensor('generatorTrip', 'Generator tripped', '', flagDisplay, bit(1)),
  sensor('foldback', 'Generator folds back', '', flagDisplay, bit(2)),
  sensor('watchdogFlag', 'Watchdog of the network', '', flagDisplay, bit(3)),
];

const derived: ChannelInput[] = [
  {
    kind: 'derived',
    id: 'delivered',
    title: 'Delivered power',
    unit: 'W',
    display: { min: 0, max: 1100, decimals: 1 },
    expression: 'forward - reflected',
  },
  {
    kind: 'derived',
    id: 'reflectedShare',
    title: 'Reflected share',
    unit: '%',
    display: { min: 0, max: 100, decimals: 2 },
    expression: '100 * reflected / forward',
  },
];

function input(address: number, more: object) {
  return word('input-register', address, more);
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
