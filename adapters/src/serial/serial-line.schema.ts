import { z } from 'zod';

/** How to open a serial port and how its lines end. */
export const serialLineConfigurationSchema = z.strictObject({
  path: z
    .string()
    .trim()
    .min(1, 'Give the path of the serial port, e.g. /dev/ttyUSB0.')
    .max(255)
    .describe('Path of the serial port, e.g. /dev/ttyUSB0.'),
  baudRate: z.int().min(50).max(4_000_000).default(9600).describe('Bits per second.'),
  dataBits: z.literal([5, 6, 7, 8]).default(8),
  parity: z.enum(['none', 'even', 'odd']).default('none'),
  stopBits: z.literal([1, 1.5, 2]).default(1),
  delimiter: z.string().min(1).max(4).default('\n').describe('What ends a line that the device sends.'),
  mostLineChars: z.int().min(1).max(100_000).default(4096).describe('Longer lines are dropped as noise.'),
});

export type SerialLineConfiguration = z.infer<typeof serialLineConfigurationSchema>;
