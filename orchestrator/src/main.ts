import { fileURLToPath } from 'node:url';
import { NestFactory } from '@nestjs/core';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { AppModule } from './app.module.js';
import { ConfigError, parseConfig, type Config } from './config/config.schema.js';
import { DataFolderInUseError } from './database/data-folder-lock.js';
import { setUpHttp } from './http/set-up-http.js';
import { SetupService } from './setup/setup.service.js';

const consoleFolder = fileURLToPath(new URL('../../console/dist', import.meta.url));

async function start(config: Config): Promise<void> {
  const app = await NestFactory.create<NestExpressApplication>(AppModule.register(config), {
    // Without this an idle keep-alive connection would hold the end up for seconds.
    forceCloseConnections: true,
    logger: ['error', 'warn', 'log'],
    bodyParser: false,
    abortOnError: false,
  });
  setUpHttp(app, config);
  app.enableShutdownHooks(['SIGTERM', 'SIGINT']);
  try {
    await app.listen(config.port, config.host);
  } catch (error) {
    // Rig hosts may run already: they are ended in order.
    await app.close();
    throw error;
  }
  console.log(`Cresthold listens at ${await app.getUrl()}`);
  const code = await app.get(SetupService).currentCode();
  if (code !== null) console.log(`No account exists yet. Set-up code for the first administrator: ${code}`);
}

/** What whoever starts the server can mend is told in words, everything else with its stack. */
function explain(error: unknown): string {
  if (error instanceof ConfigError || error instanceof DataFolderInUseError) return error.message;
  if (error instanceof Error && 'code' in error && error.code === 'EADDRINUSE') {
    return `The port is taken: end what listens on it, or set CRESTHOLD_PORT. (${error.message})`;
  }
  return error instanceof Error ? (error.stack ?? error.message) : String(error);
}

try {
  await start(parseConfig(process.env, consoleFolder));
} catch (error) {
  console.error(explain(error));
  process.exit(1);
}
