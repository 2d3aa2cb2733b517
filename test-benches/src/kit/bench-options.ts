import { parseArgs } from 'node:util';
import { z } from 'zod';
import type { BenchDefinition } from './bench-definition.js';
import { commonFaults, parsePlannedFault, type PlannedFault } from './faults.js';

const onOff = z.enum(['on', 'off'], 'Give on or off.').transform((text) => text === 'on');
const path = z.string().min(1).nullable().default(null);

const commonSchema = z.object({
  seed: z.coerce.number().int().default(1),
  log: path,
  noise: onOff.default(true),
  drift: onOff.default(true),
});

const tcpSchema = z.object({
  port: z.coerce.number().int().min(0).max(65_535).default(0),
  host: z.string().min(1).default('127.0.0.1'),
});

const lineSchema = z.object({
  serial: path,
  pty: path,
  baud: z.coerce.number().int().min(300).max(4_000_000).default(19_200),
  parity: z.enum(['none', 'even', 'odd'], 'Give none, even or odd.').optional(),
  stop: z.coerce
    .number()
    .pipe(z.literal([1, 2]))
    .default(1),
});

const unitSchema = z.coerce.number().int().min(1).max(246).optional();

export type TcpOptions = z.infer<typeof tcpSchema>;
export type LineOptions = z.infer<typeof lineSchema>;

/** What a bench was told at its start. */
export interface BenchOptions extends z.infer<typeof commonSchema> {
  readonly speed: number;
  /** Null: the unit of the register map. */
  readonly unit: number | null;
  readonly faults: readonly PlannedFault[];
  /** Of a bench on TCP, else null. */
  readonly tcp: TcpOptions | null;
  /** Of a bench on a serial line, else null. */
  readonly line: LineOptions | null;
  readonly own: Readonly<Record<string, unknown>>;
}

/** Options and faults of a bench, as they are shown to whoever asks or errs. */
export function benchUsage(definition: BenchDefinition): string {
  const { name, title, wire, speed, nanValue, ownOptions = {}, ownFaults = [] } = definition;
  const faults = [
    ...Object.entries(commonFaults),
    ...ownFaults.map((fault) => [fault.name, fault.what] as const),
  ].map(([kind, what], index) => `  ${String(index + 1).padStart(2)} ${kind.padEnd(10)} ${what}`);
  const row = (option: string, what: string) => `  ${option.padEnd(20)} ${what}`;
  return [
    `${title}, ${wire.kind}. Usage: npm run start-bench -- ${name} [options]`,
    ...wireUsage(wire.kind).map(([option, what]) => row(option, what)),
    row('--speed X', `bench seconds per second, up to 100 (default ${speed})`),
    row('--seed N', 'seed of noise and hidden state (default 1)'),
    row('--log FILE', 'append writes, watchdog events, faults and the truth as JSON lines'),
    row('--drift on|off', '(default on)'),
    row('--noise on|off', '(default on)'),
    ...Object.entries(ownOptions).map(([option, { usage }]) => row(`--${option}`, usage)),
    row('--fault FAULT', 'KIND[.VALUE][@FROM[:FOR]], s of bench time, e.g. freeze@60:5; may be repeated'),
    `Faults, with their code for the instructor (the usual value of nan is ${nanValue}):`,
    ...faults,
  ].join('\n');
}

function wireUsage(kind: BenchDefinition['wire']['kind']): readonly (readonly [string, string])[] {
  const unit = ['--unit N', 'Modbus unit that answers'] as const;
  if (kind === 'modbus-tcp') {
    return [
      ['--port N', 'TCP port; 0 takes any free one and prints it (default 0)'],
      ['--host ADDRESS', '(default 127.0.0.1)'],
      unit,
    ];
  }
  return [
    ['--pty PATH', 'make a pseudo-terminal and link it there (needs socat)'],
    ['--serial PATH', 'open a port instead'],
    ['--baud N', 'of the port (default 19200)'],
    ['--parity none|even|odd', kind === 'modbus-rtu' ? '(default even)' : '(default none)'],
    ['--stop 1|2', 'stop bits (default 1)'],
    ...(kind === 'modbus-rtu' ? [unit] : []),
  ];
}

/**
 * @param args what follows the program's name
 * @throws Error that names the options at fault
 */
export function parseBenchOptions(definition: BenchDefinition, args: string[]): BenchOptions {
  const values = textsOf(definition, args);
  const faults: string[] = [];
  const parse = <T>(schema: z.ZodType<T>, input: unknown, name?: string): T | null => {
    const outcome = schema.safeParse(input);
    if (outcome.success) return outcome.data;
    for (const { path: at, message } of outcome.error.issues)
      faults.push(`--${name ?? at.join('.')}: ${message}`);
    return null;
  };
  const { kind } = definition.wire;
  const common = parse(commonSchema, values);
  const speed = parse(
    z.coerce.number().positive().max(100).default(definition.speed),
    values['speed'],
    'speed',
  );
  const unit = parse(unitSchema, values['unit'], 'unit') ?? null;
  const tcp = kind === 'modbus-tcp' ? parse(tcpSchema, values) : null;
  const line = kind === 'modbus-tcp' ? null : parse(lineSchema, values);
  if (line && (line.serial === null) === (line.pty === null))
    faults.push('--pty, --serial: give one of the two.');
  const own = Object.fromEntries(
    Object.entries(definition.ownOptions ?? {}).map(([name, { schema }]) => [
      name,
      parse(schema, values[name], name),
    ]),
  );
  const planned = planFaults(definition, values['fault'] ?? [], faults);
  if (faults.length > 0 || !common || speed === null) throw new Error(faults.join('\n'));
  return { ...common, speed, unit, faults: planned, tcp, line, own };
}

function textsOf(definition: BenchDefinition, args: string[]): Record<string, string | string[] | undefined> {
  const names = ['speed', ...Object.keys(commonSchema.shape), ...Object.keys(definition.ownOptions ?? {})];
  const { kind } = definition.wire;
  names.push(...Object.keys((kind === 'modbus-tcp' ? tcpSchema : lineSchema).shape));
  if (kind !== 'serial-text') names.push('unit');
  const options = Object.fromEntries(names.map((name) => [name, { type: 'string' } as const]));
  const { values } = parseArgs({
    args,
    options: { ...options, fault: { type: 'string', multiple: true } },
    strict: true,
  });
  return values;
}

function planFaults(
  definition: BenchDefinition,
  texts: string | string[],
  faults: string[],
): readonly PlannedFault[] {
  const kinds = [...Object.keys(commonFaults), ...(definition.ownFaults ?? []).map(({ name }) => name)];
  return [texts].flat().flatMap((text) => {
    try {
      return [parsePlannedFault(text, kinds)];
    } catch (error) {
      faults.push(`--fault: ${error instanceof Error ? error.message : String(error)}`);
      return [];
    }
  });
}
