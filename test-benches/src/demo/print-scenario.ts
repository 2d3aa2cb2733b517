import { parseArgs } from 'node:util';
import { z } from 'zod';
import { demoScenario } from './demo-scenario.js';

/**
 * Prints the demo scenario as JSON: `print-scenario.js --bench-port N [--bench-host ADDRESS] [--bench NAME=PLACE]…`,
 * where a place is the port of a bench on TCP or the path of one on a serial line.
 */
const optionsSchema = z.object({
  'bench-host': z.string().min(1).default('127.0.0.1'),
  'bench-port': z.coerce.number().int().min(1).max(65_535),
  bench: z.array(z.string().regex(/^\w+=.+$/, 'Give NAME=PLACE.')).default([]),
});

const text = { type: 'string' } as const;
const { values } = parseArgs({
  options: { 'bench-host': text, 'bench-port': text, bench: { ...text, multiple: true } },
});
const options = optionsSchema.parse(values);
const further = Object.fromEntries(
  options.bench.map((pair) => {
    const sign = pair.indexOf('=');
    return [pair.slice(0, sign), pair.slice(sign + 1)] as const;
  }),
);
const address = { benchHost: options['bench-host'], benchPort: options['bench-port'] };
process.stdout.write(`${JSON.stringify(demoScenario(address, further), null, 2)}\n`);
