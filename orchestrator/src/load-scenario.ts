import { readFileSync } from 'node:fs';
import { NestFactory } from '@nestjs/core';
import { DomainError, scenarioSchema, type Scenario } from '@cresthold/shared';
import { AppModule } from './app.module.js';
import { parseConfig } from './config/config.schema.js';
import { toFieldFault } from './problem-details/request-validation.pipe.js';
import { ScenarioLoader } from './scenario/scenario.loader.js';

/**
 * Loads a scenario file into the fresh data folder that CRESTHOLD_DATA names, while no server runs on it:
 * `node dist/load-scenario.js FILE`. Prints accounts, passwords and ids as JSON on standard output.
 */
async function loadScenario(file: string): Promise<void> {
  const scenario = readScenario(file);
  const config = parseConfig(process.env, '.');
  const app = await NestFactory.createApplicationContext(AppModule.registerWithoutRigHosts(config), {
    logger: ['error', 'warn'],
    abortOnError: false,
  });
  try {
    const loaded = await app.get(ScenarioLoader).load(scenario);
    process.stdout.write(`${JSON.stringify(loaded, null, 2)}\n`);
  } finally {
    await app.close();
  }
}

function readScenario(file: string): Scenario {
  const outcome = scenarioSchema.safeParse(JSON.parse(readFileSync(file, 'utf8')));
  if (outcome.success) return outcome.data;
  throw new DomainError(
    'request.invalid',
    `The scenario ${file} has faults.`,
    outcome.error.issues.map(toFieldFault),
  );
}

function explain(error: unknown): string {
  if (!(error instanceof DomainError)) return error instanceof Error ? error.message : String(error);
  return [error.message, ...error.details.map(({ field, message }) => `  ${field}: ${message}`)].join('\n');
}

const file = process.argv[2];
if (file === undefined) {
  console.error('Usage: CRESTHOLD_DATA=FOLDER node dist/load-scenario.js FILE');
  process.exit(2);
}
try {
  await loadScenario(file);
} catch (error) {
  console.error(explain(error));
  process.exitCode = 1;
}
