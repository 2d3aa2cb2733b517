import { z } from 'zod';

/** The four tables of the MODBUS data model (MODBUS Application Protocol V1.1b3, 4.3). */
export const modbusTables = ['coil', 'discrete-input', 'holding-register', 'input-register'] as const;
export type ModbusTable = (typeof modbusTables)[number];

/** How the words of a register value are read; `bit` is for coils and discrete inputs. */
export const modbusTypes = ['bit', 'u16', 'i16', 'u32', 'i32', 'f32'] as const;
export type ModbusType = (typeof modbusTypes)[number];

export const registersOfType: Readonly<Record<ModbusType, number>> = {
  bit: 1,
  u16: 1,
  i16: 1,
  u32: 2,
  i32: 2,
  f32: 2,
};

const finite = z.number();

/**
 * Where one value lives in a MODBUS device, and how its raw form becomes an engineering value:
 * engineering = raw · scale + offset.
 */
export const modbusAddressSchema = z
  .strictObject({
    unit: z.int().min(1).max(247).default(1).describe('Unit (slave) number, 1 to 247.'),
    table: z.enum(modbusTables).describe('Table that the value is in.'),
    address: z
      .int()
      .min(0)
      .max(65_535)
      .describe('Address as it goes over the wire, from 0: "register 40001" is holding register 0.'),
    type: z.enum(modbusTypes).describe('Form of the value; "bit" for coils and discrete inputs.'),
    wordOrder: z
      .enum(['big', 'little'])
      .default('big')
      .describe('For 32-bit values: "big" where the high word comes first.'),
    byteOrder: z
      .enum(['big', 'little'])
      .default('big')
      .describe('Within a word: "big" as the protocol says; "little" for devices that swap bytes.'),
    scale: finite
      .refine((scale) => scale !== 0, 'A scale of 0 would make every value the same: give another number.')
      .default(1)
      .describe('Engineering value = raw · scale + offset.'),
    offset: finite.default(0).describe('Engineering value = raw · scale + offset.'),
  })
  .superRefine((value, context) => {
    const hasBits = value.table === 'coil' || value.table === 'discrete-input';
    if (hasBits !== (value.type === 'bit')) {
      context.addIssue({
        code: 'custom',
        path: ['type'],
        message: hasBits
          ? `A ${value.table} holds one bit: use type "bit".`
          : `A ${value.table} holds words: use one of u16, i16, u32, i32, f32.`,
      });
    }
    if (value.address <= 65_535 && value.address + registersOfType[value.type] > 65_536) {
      context.addIssue({
        code: 'custom',
        path: ['address'],
        message: 'The value would reach past address 65535: use a lower address.',
      });
    }
  });

export type ModbusAddress = z.infer<typeof modbusAddressSchema>;

/** Number of registers or bits that the value takes. */
export function widthOf(address: Pick<ModbusAddress, 'type'>): number {
  return registersOfType[address.type];
}

export function isBitTable(table: ModbusTable): boolean {
  return table === 'coil' || table === 'discrete-input';
}

/** E.g. `unit 1, holding-register 40`, or `unit 1, holding-register 40 to 47` for several. */
export function placeText(unit: number, table: ModbusTable, address: number, count: number): string {
  const last = count > 1 ? ` to ${address + count - 1}` : '';
  return `unit ${unit}, ${table} ${address}${last}`;
}
