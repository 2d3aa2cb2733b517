/** As much of a JSON Schema as a column needs. */
export interface AddressSchema {
  readonly type?: string | readonly string[];
  readonly title?: string;
  readonly description?: string;
  readonly default?: unknown;
  readonly const?: unknown;
  readonly enum?: readonly unknown[];
  readonly anyOf?: readonly AddressSchema[];
  readonly properties?: Readonly<Record<string, AddressSchema>>;
  readonly required?: readonly string[];
}

/** How the text of a cell becomes a value. */
export type CellKind = 'text' | 'number' | 'integer' | 'boolean' | 'choice' | 'json';

export interface ChannelColumn {
  /** Path of the field in a channel, which is also its name in a file: `display.min`, `address.bits.from`. */
  key: string;
  title: string;
  help: string;
  kind: CellKind;
  /** What a choice takes. */
  options: readonly (string | number | boolean)[];
  /** For screens: what holds where the cell is empty; null where nothing does. */
  fallback: string | null;
  isRequired: boolean;
}

type ChannelKind = 'sensor' | 'actuator' | 'trace' | 'derived';

export const channelKinds: readonly ChannelKind[] = ['sensor', 'actuator', 'derived', 'trace'];

function fixed(key: string, title: string, kind: CellKind, help: string, isRequired = true): ChannelColumn {
  return { key, title, help, kind, options: [], fallback: null, isRequired };
}

/** Columns that every rig has, in the order of the table. */
export const fixedColumns: readonly ChannelColumn[] = [
  fixed('id', 'Id', 'text', 'Name in expressions and records: a lower-case letter, then letters and digits.'),
  fixed('title', 'Title', 'text', 'What people read.'),
  { ...fixed('kind', 'Kind', 'choice', 'Sensor, actuator, derived or trace.'), options: channelKinds },
  fixed('unit', 'Unit', 'text', 'E.g. %, °C; empty for a pure number.', false),
  fixed('display.min', 'Shown from', 'number', 'Lower end of the display range; no limit.'),
  fixed('display.max', 'Shown to', 'number', 'Upper end of the display range; no limit.'),
  fixed('display.decimals', 'Decimals', 'integer', 'Decimals that are shown, 0 to 9.'),
  fixed('connection', 'Connection', 'text', 'Id of the connection that carries it.'),
  fixed('expression', 'Expression', 'text', 'Of a derived channel: what it is made of.'),
  fixed('axis.title', 'Axis', 'text', 'Of a trace: what its points stand for.'),
  fixed('axis.unit', 'Axis unit', 'text', 'Of a trace; empty for a pure number.', false),
  fixed('axis.from', 'Axis from', 'number', 'Of a trace: place of the first point.'),
  fixed('axis.step', 'Axis step', 'number', 'Of a trace: distance of two points.'),
];

/**
 * One column for each field of an adapter's address; the fields of a group have a column each.
 *
 * @example
 * addressColumns({ properties: { register: { type: 'integer' } } })[0].key // 'address.register'
 */
export function addressColumns(schema: AddressSchema, root = 'address'): ChannelColumn[] {
  const required = new Set(schema.required);
  return Object.entries(schema.properties ?? {}).flatMap(([name, declared]) => {
    const key = `${root}.${name}`;
    const field = onlyChoice(declared);
    if (field.properties)
      return addressColumns(field, key).map((column) => ({ ...column, isRequired: false }));
    return [columnOf(key, name, field, required.has(name) && field.default === undefined)];
  });
}

/** Whether a column means anything for a channel of this kind. */
export function hasCell(kind: string, key: string): boolean {
  if (key === 'expression') return kind === 'derived';
  if (key.startsWith('axis.')) return kind === 'trace';
  if (key === 'connection' || key.startsWith('address.')) return kind !== 'derived';
  return true;
}

function columnOf(key: string, name: string, field: AddressSchema, isRequired: boolean): ChannelColumn {
  const { title: own = labelOf(name), description: help = '', default: fallback } = field;
  // E.g. the unit number of a device beside the unit of the channel.
  const title = fixedColumns.some((column) => column.title === own) ? `${own} (address)` : own;
  const options = optionsOf(field);
  const kind = options.length > 0 ? 'choice' : kindOf(field.type);
  const shown = fallback === undefined || fallback === null ? null : textOf(fallback);
  return { key, title, help, kind, options, fallback: shown, isRequired };
}

function textOf(value: unknown): string {
  return typeof value === 'string' ? value : JSON.stringify(value);
}

/** A null among alternatives means that the field may be left out. */
function onlyChoice(schema: AddressSchema): AddressSchema {
  const given = schema.anyOf?.filter(({ type }) => type !== 'null') ?? [];
  const [first] = given;
  if (given.length === 1 && first) return { ...first, ...schema, anyOf: undefined };
  if (given.length > 0 && given.every((one) => 'const' in one)) {
    return { ...schema, enum: given.map((one) => one.const) };
  }
  return schema;
}

function optionsOf({ enum: given, const: only }: AddressSchema): (string | number | boolean)[] {
  return [...(given ?? []), ...(only === undefined ? [] : [only])].filter(
    (value) => typeof value === 'string' || typeof value === 'number' || typeof value === 'boolean',
  );
}

function kindOf(type: AddressSchema['type']): CellKind {
  switch (type) {
    case 'string':
      return 'text';
    case 'number':
    case 'integer':
    case 'boolean':
      return type;
    default:
      return 'json';
  }
}

function labelOf(name: string): string {
  const words = name.replace(/([a-z0-9])([A-Z])/g, '$1 $2').toLowerCase();
  return `${words.charAt(0).toUpperCase()}${words.slice(1)}`;
}
