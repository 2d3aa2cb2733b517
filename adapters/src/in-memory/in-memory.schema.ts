import { z } from 'zod';

export const inMemoryConfigurationSchema = z.strictObject({
  store: z.string().min(1).max(100).describe('Name of the store; sessions with the same name share values.'),
  timeoutMs: z.number().min(1).max(60_000).default(100).describe('Longest time, ms, for one read or write.'),
});

export const inMemoryAddressSchema = z.strictObject({
  name: z.string().min(1).max(100).describe('Name of the value in the store.'),
  quantum: z.number().min(0).default(0).describe('Step of the values, engineering unit; 0 for none.'),
  min: z.number().default(-1e9).describe('Least value that can be written.'),
  max: z.number().default(1e9).describe('Greatest value that can be written.'),
  isWritable: z.boolean().default(true).describe('Whether it may be written.'),
  points: z.int().min(1).max(65_536).default(1).describe('Points per read: 1, or more for a trace.'),
});

export type InMemoryConfiguration = z.infer<typeof inMemoryConfigurationSchema>;
export type InMemoryAddress = z.infer<typeof inMemoryAddressSchema>;
