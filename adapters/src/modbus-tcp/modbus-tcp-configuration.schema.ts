import { z } from 'zod';

/** How to reach a Modbus TCP device. */
export const modbusTcpConfigurationSchema = z.strictObject({
  host: z
    .string()
    .trim()
    .min(1, 'Give the host name or IP address of the device.')
    .max(253, 'At most 253 characters.')
    .describe('Host name or IP address of the device.'),
  port: z.int().min(1).max(65_535).default(502).describe('TCP port; 502 by the standard.'),
  timeoutMs: z
    .number()
    .min(10)
    .max(60_000)
    .default(1000)
    .describe('Longest time, ms, for opening and for one whole read or write.'),
  gap: z
    .int()
    .min(0)
    .max(124)
    .default(0)
    .describe('Registers between two channels that may be read along to save a request; 0 reads none.'),
  silencesUntilLost: z
    .int()
    .min(1)
    .max(100)
    .default(3)
    .describe('Requests in a row without any answer after which the connection counts as lost.'),
});

export type ModbusTcpConfiguration = z.infer<typeof modbusTcpConfigurationSchema>;
