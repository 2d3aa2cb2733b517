import { DataSource } from 'typeorm';
import { verifyAudit } from './audit/verify-audit.js';
import { parseConfig } from './config/config.schema.js';
import { dataSourceOptions } from './database/data-source-options.js';

/**
 * Verifies the audit log of the data folder that CRESTHOLD_DATA names, also while a server runs on it. Prints what
 * was found; ends with 1 where the chain is broken.
 */
const { dataFolder } = parseConfig(process.env, '.');
const options = { ...dataSourceOptions(dataFolder), migrationsRun: false };
try {
  const database = await new DataSource(options).initialize();
  const { isIntact, entries, headHash, firstBreak, badSeals } = await verifyAudit(database);
  await database.destroy();
  console.log(`${entries} entries in order. Hash of the last: ${headHash}`);
  if (firstBreak !== null) console.log(`The chain breaks at entry ${firstBreak.id}: ${firstBreak.what}`);
  for (const run of badSeals) console.log(`Run ${run} has another seal than the one kept in the log.`);
  console.log(isIntact ? 'The audit log is intact.' : 'The audit log is NOT intact.');
  process.exitCode = isIntact ? 0 : 1;
} catch (error) {
  console.error(error instanceof Error ? error.message : String(error));
  process.exitCode = 2;
}
