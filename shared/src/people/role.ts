import { z } from 'zod';

export const roleSchema = z.enum([
  'administrator',
  'safety-officer',
  'test-engineer',
  'technician',
  'reader',
]);
export type Role = z.infer<typeof roleSchema>;
export const roles = roleSchema.options;
