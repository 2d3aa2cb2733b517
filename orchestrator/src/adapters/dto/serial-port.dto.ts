import { z } from 'zod';
import { pageSchema } from '../../paging/page.js';

export const serialPortSchema = z
  .object({
    /** What a connection names, e.g. `/dev/ttyUSB0`. */
    path: z.string(),
    /** Path that stays the same wherever the device is plugged in; the better one to name where there is one. */
    stablePath: z.string().nullable(),
    manufacturer: z.string().nullable(),
    serialNumber: z.string().nullable(),
    /** USB vendor and product, four hexadecimal digits each. */
    vendorId: z.string().nullable(),
    productId: z.string().nullable(),
  })
  .meta({ id: 'SerialPort' });
export type SerialPort = z.infer<typeof serialPortSchema>;

export const serialPortListSchema = pageSchema(serialPortSchema).meta({ id: 'SerialPortPage' });
