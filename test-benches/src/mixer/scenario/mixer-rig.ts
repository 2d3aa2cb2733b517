import type { RigInput, TcpPlace } from '../../kit/scenario-input.js';

type ChannelInput = RigInput['channels'][number];

const wire = { connection: 'plc' } as const;
const holding = (address: number, scale = 1) => ({
  unit: 1,
  table: 'holding-register',
  address,
  type: 'u16',
  scale,
});
const input = (address: number, type: 'u16' | 'i16' | 'f32', scale = 1) => ({
  unit: 1,
  table: 'input-register',
  address,
  type,
  scale,
});
const flag = (address: number) => ({ unit: 1, table: 'discrete-input', address, type: 'bit' });

/**
 * Mixer 1 of the Brackwater Test Station: four cultures on one feed. All times of its documents are real
 * seconds; the bench runs five times as fast as they say.
 */
export function mixerRig({ host, port }: TcpPlace): RigInput {
  return {
    id: 'mixer-1',
    title: 'Mixer 1',
    description:
      'Four continuous cultures of the Brackwater Test Station, simulated. A distributor parts one feed among them; the yield has three hills, and shows itself only after a while.',
    periodMs: 100,
    connections: [
      {
        id: 'plc',
        title: 'Mixer controller',
        adapter: 'modbus-tcp',
        configuration: { host, port, timeoutMs: 500 },
      },
    ],
    channels,
  };
}

const channels: ChannelInput[] = [
  {
    kind: 'actuator',
    id: 'distributor',
    title: 'Distributor',
    unit: '%',
    display: { min: 0, max: 100, decimals: 2 },
    ...wire,
    address: holding(0, 0.01),
  },
  {
    kind: 'actuator',
    id: 'heartbeat',
    title: 'Heartbeat',
    unit: '',
    display: { min: 0, max: 65_535, decimals: 0 },
    ...wire,
    address: holding(1),
  },
  sensor('position', 'Distributor position', '%', { min: 0, max: 100, decimals: 2 }, input(0, 'u16', 0.01)),
  sensor(
    'cultureTemp',
    'Culture temperature',
    '°C',
    { min: 20, max: 40, decimals: 2 },
    input(1, 'i16', 0.01),
  ),
  sensor('biomass', 'Biomass made', 'g/L', { min: 0, max: 5, decimals: 3 }, input(2, 'f32')),
  sensor('substrate', 'Substrate wasted', 'g/L', { min: 0, max: 10, decimals: 3 }, input(4, 'f32')),
  sensor('feedFlow', 'Feed flow', 'L/h', { min: 0, max: 2, decimals: 2 }, input(6, 'f32')),
  sensor('pumpRunning', 'Feed pump', '', { min: 0, max: 1, decimals: 0 }, flag(0)),
  sensor('watchdogFlag', 'Watchdog of the mixer', '', { min: 0, max: 1, decimals: 0 }, flag(1)),
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
