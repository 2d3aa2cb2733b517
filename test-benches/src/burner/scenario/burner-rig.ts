import type { RigInput, TcpPlace } from '../../kit/scenario-input.js';

const register = (address: number, type: 'u16' | 'i16' | 'f32', scale = 1) => ({
  unit: 1,
  table: 'holding-register',
  address,
  type,
  ...(type === 'f32' ? { wordOrder: 'big' } : {}),
  scale,
});
const wire = { connection: 'plc' } as const;

/**
 * Burner 1 of the Brackwater Test Station: a gas burner with an air damper. All times of its documents are
 * real seconds; the bench runs five times as fast as they say.
 */
export function burnerRig({ host, port }: TcpPlace): RigInput {
  return {
    id: 'burner-1',
    title: 'Burner 1',
    description:
      'Gas burner of the Brackwater Test Station, simulated. Less air wastes less heat, until CO soars; where that happens drifts with the fuel.',
    isBench: true,
    periodMs: 50,
    connections: [
      {
        id: 'plc',
        title: 'Burner controller',
        adapter: 'modbus-tcp',
        configuration: { host, port, timeoutMs: 500 },
      },
    ],
    channels: [...actuators, ...sensors, ...derived],
  };
}

type ChannelInput = RigInput['channels'][number];

const actuators: ChannelInput[] = [
  {
    kind: 'actuator',
    id: 'airTrim',
    title: 'Air trim',
    unit: '%',
    display: { min: 0, max: 100, decimals: 2 },
    ...wire,
    address: register(0, 'u16', 0.01),
  },
  {
    kind: 'actuator',
    id: 'heartbeat',
    title: 'Heartbeat',
    unit: '',
    display: { min: 0, max: 65_535, decimals: 0 },
    ...wire,
    address: register(1, 'u16'),
  },
];

const sensors: ChannelInput[] = [
  sensor('damper', 'Damper position', '%', { min: 0, max: 100, decimals: 2 }, register(2, 'u16', 0.01)),
  sensor('o2', 'Oxygen', '%', { min: 0, max: 21, decimals: 2 }, register(3, 'u16', 0.01)),
  sensor('co', 'Carbon monoxide', 'ppm', { min: 0, max: 3000, decimals: 0 }, register(4, 'f32')),
  sensor(
    'flueTemp',
    'Flue gas temperature',
    '°C',
    { min: 0, max: 250, decimals: 1 },
    register(6, 'i16', 0.1),
  ),
  sensor(
    'airTemp',
    'Combustion air temperature',
    '°C',
    { min: 0, max: 50, decimals: 1 },
    register(7, 'i16', 0.1),
  ),
  sensor('flame', 'Flame', '', { min: 0, max: 1, decimals: 0 }, register(8, 'u16')),
  sensor('watchdogFlag', 'Watchdog of the burner', '', { min: 0, max: 1, decimals: 0 }, register(9, 'u16')),
  sensor('fuelFlow', 'Fuel flow', 'm³/h', { min: 0, max: 20, decimals: 2 }, register(11, 'f32')),
];

/** The losses as the bench has them: Siegert's stack loss for natural gas, and the heat left in CO. */
const derived: ChannelInput[] = [
  {
    kind: 'derived',
    id: 'stackLoss',
    title: 'Stack loss',
    unit: '%',
    display: { min: 0, max: 15, decimals: 3 },
    expression: '(flueTemp - airTemp) * (weight(0.66) / (21 - o2) + weight(0.009))',
  },
  {
    kind: 'derived',
    id: 'unburntLoss',
    title: 'Unburnt loss',
    unit: '%',
    display: { min: 0, max: 3, decimals: 3 },
    expression: '35.27 * (co / 10000) / (co / 10000 + 11.8 * (21 - o2) / 21)',
  },
  {
    kind: 'derived',
    id: 'efficiency',
    title: 'Combustion efficiency',
    unit: '%',
    display: { min: 88, max: 95, decimals: 3 },
    expression: '100 - stackLoss - unburntLoss',
  },
];

function sensor(
  id: string,
  title: string,
  unit: string,
  display: ChannelInput['display'],
  address: ReturnType<typeof register>,
): ChannelInput {
  return { kind: 'sensor', id, title, unit, display, ...wire, address };
}
