import { z } from 'zod';

/** Fields that the configurations of all Modbus adapters share. */
export const modbusConfigurationFields = {
  gap: z.int().min(0).max(124).default(0).meta({
    title: 'Gap',
    description:
      'Registers (or bits) between two channels that may be read along to save a request; 0 reads none.',
  }),
  readBack: z
    .boolean()
    .default(false)
    .meta({
      title: 'Read back',
      description:
        'Each write of registers reads back, in the same request (function code 23), what the device then ' +
        'holds; a difference is reported.',
    }),
  units: z
    .array(
      z.strictObject({
        unit: z.int().min(1).max(255).meta({ title: 'Unit', description: 'Unit (slave) number.' }),
        timeoutMs: z
          .number()
          .min(5)
          .max(60_000)
          .meta({ title: 'Timeout', description: 'Longest wait for an answer of this unit, ms.' }),
      }),
    )
    .max(247)
    .default([])
    .meta({
      title: 'Slow units',
      description: 'Units that are granted another time to answer than the rest.',
    }),
  mostBackOffMs: z.number().min(0).max(600_000).default(15_000).meta({
    title: 'Longest back-off',
    description:
      'Longest time, ms, for which a unit that does not answer is left alone while others on the connection do.',
  }),
};
