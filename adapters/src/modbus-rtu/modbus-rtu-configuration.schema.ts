import { z } from 'zod';
import { modbusConfigurationFields } from '../modbus/modbus-configuration.fields.js';
import { serialPortFields } from '../serial/serial-port.schema.js';

/** How to reach the Modbus RTU devices on one serial line. */
export const modbusRtuConfigurationSchema = z.strictObject({
  path: serialPortFields.path,
  baudRate: serialPortFields.baudRate.min(300).default(19_200).meta(metaOf(serialPortFields.baudRate)),
  parity: serialPortFields.parity.default('even').meta(metaOf(serialPortFields.parity)),
  stopBits: z.literal([1, 2]).default(1).meta(metaOf(serialPortFields.stopBits)),
  timeoutMs: z.number().min(20).max(60_000).default(2000).meta({
    title: 'Timeout',
    description: 'Longest time, ms, for one whole read or write of all units together.',
  }),
  unitTimeoutMs: z
    .number()
    .min(5)
    .max(60_000)
    .default(300)
    .meta({
      title: 'Timeout of a unit',
      description:
        'Longest wait, ms, from the end of a request to its answer, beside the time that both take on the wire. ' +
        'Longer than the slowest answer of any device.',
    }),
  silencesUntilLost: z.int().min(1).max(1000).default(10).meta({
    title: 'Silences until lost',
    description:
      'Requests in a row without any answer, of whatever unit, after which the port is opened again.',
  }),
  hasEcho: z.boolean().default(false).meta({
    title: 'Echo',
    description: 'Whether the line brings back what is sent, as some two-wire adapters do.',
  }),
  turnaroundMs: z.number().min(0).max(1000).default(0).meta({
    title: 'Turnaround',
    description:
      'Time, ms, that the devices on a two-wire line need after an answer to let go of it, beside the silent interval.',
  }),
  ...modbusConfigurationFields,
});

function metaOf(schema: z.ZodType): { title?: string; description?: string } {
  const { title, description } = schema.meta() ?? {};
  return { ...(title !== undefined && { title }), ...(description !== undefined && { description }) };
}

export type ModbusRtuConfiguration = z.infer<typeof modbusRtuConfigurationSchema>;
