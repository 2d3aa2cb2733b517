import { z } from 'zod';

/** The four tables of the MODBUS data model (MODBUS Application Protocol V1.1b3, 4.3). */
export const modbusTables = ['coil', 'discrete-input', 'holding-register', 'input-register'] as const;
export type ModbusTable = (typeof modbusTables)[number];

/** How the words of a register value are read; `bit` is for coils and discrete inputs. */
export const modbusTypes = ['bit', 'u16', 'i16', 'u32', 'i32', 'f32', 'u64', 'i64', 'f64'] as const;
export type ModbusType = (typeof modbusTypes)[number];

export const registersOfType: Readonly<Record<ModbusType, number>> = {
  bit: 1,
  u16: 1,
  i16: 1,
  u32: 2,
  i32: 2,
  f32: 2,
  u64: 4,
  i64: 4,
  f64: 4,
};

/** Most values of one trace. */
export const mostTracePoints = 4096;

const finite = z.number();

const bitFieldSchema = z.strictObject({
  from: z
    .int()
    .min(0)
    .max(15)
    .meta({ title: 'From bit', description: 'Lowest bit of the field; 0 is the least significant.' }),
  count: z.int().min(1).max(16).default(1).meta({ title: 'Bits', description: 'Number of bits.' }),
});

export type BitField = z.infer<typeof bitFieldSchema>;

const unitNumber = z
  .int()
  .min(
    1,
    'Unit 0 is the broadcast address, which no device answers, so that nothing could be confirmed: ' +
      'give the number of the device, 1 to 247.',
  );

const unitOnSerialLine = unitNumber
  .max(247, 'Units go from 1 to 247.')
  .default(1)
  .meta({ title: 'Unit', description: 'Unit (slave) number, 1 to 247.' });

/** On TCP, 255 stands for the device itself (MODBUS Messaging on TCP/IP V1.0b, 4.4.1.2). */
const unitOnTcp = unitNumber
  .max(255, 'Units go from 1 to 247; 255 stands for the device at this address itself.')
  .refine(
    (number) => number <= 247 || number === 255,
    'Units go from 1 to 247; 255 stands for the device at this address itself.',
  )
  .default(1)
  .meta({ title: 'Unit', description: 'Unit (slave) number, 1 to 247, or 255 for the device itself.' });

/** Fields of an address, apart from its unit. */
const fields = {
  table: z.enum(modbusTables).meta({ title: 'Table', description: 'Table that the value is in.' }),
  address: z.int().min(0).max(65_535).meta({
    title: 'Address',
    description: 'Address as it goes over the wire, from 0: "register 40001" is holding register 0.',
  }),
  type: z
    .enum(modbusTypes)
    .meta({ title: 'Type', description: 'Form of the value; "bit" for coils and discrete inputs.' }),
  wordOrder: z.enum(['big', 'little']).default('big').meta({
    title: 'Word order',
    description: 'For values of several words: "big" where the highest word comes first.',
  }),
  byteOrder: z.enum(['big', 'little']).default('big').meta({
    title: 'Byte order',
    description: 'Within a word: "big" as the protocol says; "little" for devices that swap bytes.',
  }),
  bits: bitFieldSchema.optional().meta({
    title: 'Bit field',
    description: 'A field of bits within one u16 register; the other bits of the register are never touched.',
  }),
  points: z.int().min(1).max(mostTracePoints).optional().meta({
    title: 'Points',
    description: 'Number of values that follow one another: a trace, which can only be read. Left out: 1.',
  }),
  stamp: z
    .int()
    .min(0)
    .max(65_535)
    .optional()
    .meta({
      title: 'Stamp register',
      description:
        'For a trace: address of a register, in the same table, that the device changes with each new array. ' +
        'It is read before and after; where it differs, the trace is read again.',
    }),
  hasMaskWrite: z
    .boolean()
    .optional()
    .meta({
      title: 'Has mask write',
      description:
        'For a bit field: false where the device lacks function code 22 (mask write). Its register is then read, ' +
        'changed and written, and what another master writes in between is lost. Left out: true.',
    }),
  scale: finite
    .refine((scale) => scale !== 0, 'A scale of 0 would make every value the same: give another number.')
    .default(1)
    .meta({ title: 'Scale', description: 'Engineering value = raw · scale + offset.' }),
  offset: finite
    .default(0)
    .meta({ title: 'Offset', description: 'Engineering value = raw · scale + offset.' }),
};

type Fields = z.infer<z.ZodObject<typeof fields>>;

/** Faults of fields that do not go together, as field and message. */
function conflictsOf(value: Fields): [field: keyof Fields, message: string][] {
  const faults: [keyof Fields, string][] = [];
  const hasBits = isBitTable(value.table);
  const isTrace = (value.points ?? 1) > 1;
  if (hasBits !== (value.type === 'bit')) {
    const registerTypes = modbusTypes.filter((type) => type !== 'bit').join(', ');
    faults.push([
      'type',
      hasBits
        ? `A ${value.table} holds one bit: use type "bit".`
        : `A ${value.table} holds words: use one of ${registerTypes}.`,
    ]);
  }
  if (value.bits && value.type !== 'u16') faults.push(['bits', 'A bit field is of a register of type u16.']);
  if (value.bits && value.bits.from + value.bits.count > 16) {
    faults.push(['bits', 'The field would reach past bit 15: use fewer bits, or a lower one.']);
  }
  if (value.bits && isTrace) faults.push(['bits', 'A trace holds whole registers: leave "bits" out.']);
  if (hasBits && isTrace) faults.push(['points', 'A trace is made of registers, not of bits.']);
  if (value.stamp !== undefined && !isTrace) faults.push(['stamp', 'Only a trace has a stamp register.']);
  if (value.address <= 65_535 && value.address + widthOf(value) > 65_536) {
    faults.push(['address', 'The value would reach past address 65535: use a lower address.']);
  }
  return faults;
}

function addressSchemaWith(unitField: typeof unitOnSerialLine) {
  return z.strictObject({ unit: unitField, ...fields }).superRefine((value, context) => {
    for (const [field, message] of conflictsOf(value)) {
      context.addIssue({ code: 'custom', path: [field], message });
    }
  });
}

/**
 * Where one value lives in a MODBUS device on a serial line, and how its raw form becomes an engineering
 * value: engineering = raw · scale + offset.
 */
export const modbusAddressSchema = addressSchemaWith(unitOnSerialLine);

/** The same on TCP, where unit 255 stands for the device itself. */
export const modbusTcpAddressSchema = addressSchemaWith(unitOnTcp);

export type ModbusAddress = z.infer<typeof modbusAddressSchema>;

/** Number of registers or bits that the value takes; of a trace, all of it. */
export function widthOf(address: Pick<ModbusAddress, 'type' | 'points'>): number {
  return registersOfType[address.type] * (address.points ?? 1);
}

export function isTrace(address: Pick<ModbusAddress, 'points'>): boolean {
  return (address.points ?? 1) > 1;
}

export function isBitTable(table: ModbusTable): boolean {
  return table === 'coil' || table === 'discrete-input';
}

/** E.g. `holding-register 40`, or `holding-register 40 to 47` for several. */
export function registersText(table: ModbusTable, address: number, count: number): string {
  const last = count > 1 ? ` to ${address + count - 1}` : '';
  return `${table} ${address}${last}`;
}

/** E.g. `unit 1, holding-register 40 to 47`. */
export function placeText(unit: number, table: ModbusTable, address: number, count: number): string {
  return `unit ${unit}, ${registersText(table, address, count)}`;
}
