import { z } from 'zod';

export const inMemoryConfigurationSchema = z.strictObject({
  store: z
    .string()
    .min(1)
    .max(100)
    .meta({ title: 'Store', description: 'Name of the store; sessions with the same name share values.' }),
  timeoutMs: z
    .number()
    .min(1)
    .max(60_000)
    .default(100)
    .meta({ title: 'Timeout', description: 'Longest time, ms, for one read or write.' }),
});

export const inMemoryAddressSchema = z.strictObject({
  name: z.string().min(1).max(100).meta({ title: 'Name', description: 'Name of the value in the store.' }),
  quantum: z
    .number()
    .min(0)
    .default(0)
    .meta({ title: 'Step', description: 'Step of the values, engineering unit; 0 for none.' }),
  min: z.number().default(-1e9).meta({ title: 'Least', description: 'Least value that can be written.' }),
  max: z
    .number()
    .default(1e9)
    .meta({ title: 'Greatest', description: 'Greatest value that can be written.' }),
  isWritable: z
    .boolean()
    .default(true)
    .meta({ title: 'Can be written', description: 'Whether it may be written.' }),
  points: z
    .int()
    .min(1)
    .max(65_536)
    .default(1)
    .meta({ title: 'Points', description: 'Points per read: 1, or more for a trace.' }),
});

export type InMemoryConfiguration = z.infer<typeof inMemoryConfigurationSchema>;
export type InMemoryAddress = z.infer<typeof inMemoryAddressSchema>;
