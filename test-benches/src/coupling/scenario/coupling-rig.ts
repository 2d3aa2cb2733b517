import type { LinePlace, RigInput } from '../../kit/scenario-input.js';

type ChannelInput = RigInput['channels'][number];

const wire = { connection: 'mount' } as const;
const unit = 5;
const holding = (address: number, scale = 1) => ({
  unit,
  table: 'holding-register',
  address,
  type: 'u16',
  scale,
});
const input = (address: number, type: 'i16' | 'f32', scale = 1) => ({
  unit,
  table: 'input-register',
  address,
  type,
  scale,
});
const flag = (address: number) => ({ unit, table: 'discrete-input', address, type: 'bit' });

/**
 * Coupling 1 of the Brackwater Test Station: a fibre on a two-axis stage, all times in seconds of the bench at its
 * own speed.
 */
export function couplingRig({ path }: LinePlace): RigInput {
  return {
    id: 'coupling-1',
    title: 'Coupling 1',
    description:
      'Two-axis fibre coupling of the Brackwater Test Station, simulated. Rings round the peak hold any plain climb; the best place drifts, and jumps when somebody knocks against the mount.',
    periodMs: 50,
    connections: [
      {
        id: 'mount',
        title: 'Controller of the mount',
        adapter: 'modbus-rtu',
        configuration: { path, baudRate: 115_200, timeoutMs: 500 },
      },
    ],
    channels,
  };
}

const channels: ChannelInput[] = [
  drive('driveX', 'Drive across', 0),
  drive('driveY', 'Drive up', 1),
  {
    kind: 'actuator',
    id: 'heartbeat',
    title: 'Heartbeat',
    unit: '',
    display: { min: 0, max: 65_535, decimals: 0 },
    ...wire,
    address: holding(2),
  },
  sensor('powerDbm', 'Coupled power', 'dBm', { min: -60, max: 5, decimals: 3 }, input(0, 'f32')),
  sensor('powerMw', 'Coupled power, linear', 'mW', { min: 0, max: 2, decimals: 4 }, input(2, 'f32')),
  sensor('mountTemp', 'Mount temperature', '°C', { min: 15, max: 35, decimals: 2 }, input(4, 'i16', 0.01)),
  sensor('shutterOpen', 'Shutter', '', { min: 0, max: 1, decimals: 0 }, flag(0)),
  sensor('watchdogFlag', 'Watchdog of the mount', '', { min: 0, max: 1, decimals: 0 }, flag(1)),
];

function drive(id: string, title: string, address: number): ChannelInput {
  const display = { min: 0, max: 100, decimals: 2 };
  return { kind: 'actuator', id, title, unit: 'V', display, ...wire, address: holding(address, 0.01) };
}

function sensor(
  id: string,
  title: string,
  unitText: string,
  display: ChannelInput['display'],
  address: Record<string, unknown>,
): ChannelInput {
  return { kind: 'sensor', id, title, unit: unitText, display, ...wire, address };
}
