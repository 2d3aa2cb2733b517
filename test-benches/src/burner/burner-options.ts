import { parseArgs } from 'node:util';
import { z } from 'zod';

const onOff = z.enum(['on', 'off'], 'Give on or off.').transform((text) => text === 'on');

const optionsSchema = z.object({
  port: z.coerce.number().int().min(0).max(65_535).default(0),
  host: z.string().min(1).default('127.0.0.1'),
  speed: z.coerce.number().positive().max(100).default(5),
  seed: z.coerce.number().int().default(1),
  log: z.string().min(1).nullable().default(null),
  drift: onOff.default(true),
  noise: onOff.default(true),
});

export type BurnerOptions = z.infer<typeof optionsSchema>;

export const burnerUsage = `Usage: main.js [options]
  --port N       TCP port; 0 takes any free one and prints it (default 0)
  --host ADDRESS (default 127.0.0.1)
  --speed X      bench seconds per second, up to 100 (default 5)
  --seed N       seed of the noise (default 1)
  --log FILE     append writes, watchdog events and the truth as JSON lines
  --drift on|off (default on)
  --noise on|off (default on)`;

/**
 * @param args what follows the program's name
 * @throws Error that names the option at fault
 */
export function parseBurnerOptions(args: string[]): BurnerOptions {
  const text = { type: 'string' } as const;
  const names = { port: text, host: text, speed: text, seed: text, log: text, drift: text, noise: text };
  const { values } = parseArgs({ args, options: names, strict: true });
  const outcome = optionsSchema.safeParse(values);
  if (outcome.success) return outcome.data;
  const faults = outcome.error.issues.map((issue) => `--${issue.path.join('.')}: ${issue.message}`);
  throw new Error(faults.join('\n'));
}
