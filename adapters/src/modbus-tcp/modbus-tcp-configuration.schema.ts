import { z } from 'zod';
import { modbusConfigurationFields } from '../modbus/modbus-configuration.fields.js';

/** How to reach a Modbus TCP device, or several units behind one gateway. */
export const modbusTcpConfigurationSchema = z.strictObject({
  host: z
    .string()
    .trim()
    .min(1, 'Give the host name or IP address of the device.')
    .max(253, 'At most 253 characters.')
    .meta({ title: 'Host', description: 'Host name or IP address of the device.' }),
  port: z
    .int()
    .min(1)
    .max(65_535)
    .default(502)
    .meta({ title: 'Port', description: 'TCP port; 502 by the standard.' }),
  timeoutMs: z.number().min(10).max(60_000).default(1000).meta({
    title: 'Timeout',
    description: 'Longest time, ms, for opening and for one whole read or write.',
  }),
  unitTimeoutMs: z.number().min(5).max(60_000).optional().meta({
    title: 'Timeout of a unit',
    description:
      'Longest wait, ms, for one answer; behind a gateway, short enough for the other units. Left out: the timeout.',
  }),
  silencesUntilLost: z.int().min(1).max(100).default(3).meta({
    title: 'Silences until lost',
    description: 'Requests in a row without any answer after which the connection counts as lost.',
  }),
  ...modbusConfigurationFields,
});

export type ModbusTcpConfiguration = z.infer<typeof modbusTcpConfigurationSchema>;
