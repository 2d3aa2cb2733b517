import { parseArgs } from 'node:util';
import { z } from 'zod';
import { demoScenario } from './demo-scenario.js';

/** Prints the demo scenario as JSON: `print-scenario.js --bench-port N [--bench-host ADDRESS]`. */
const optionsSchema = z.object({
  'bench-host': z.string().min(1).default('127.0.0.1'),
  'bench-port': z.coerce.number().int().min(1).max(65_535),
});

const text = { type: 'string' } as const;
const { values } = parseArgs({ options: { 'bench-host': text, 'bench-port': text } });
const options = optionsSchema.parse(values);
const scenario = demoScenario({ benchHost: options['bench-host'], benchPort: options['bench-port'] });
process.stdout.write(`${JSON.stringify(scenario, null, 2)}\n`);
