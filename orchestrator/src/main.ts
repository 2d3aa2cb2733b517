import { fileURLToPath } from 'node:url';
import { NestFactory } from '@nestjs/core';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { AppModule } from './app.module.js';
import { ConfigError, parseConfig, type Config } from './config/config.schema.js';
import { setUpHttp } from './http/set-up-http.js';
import { SetupService } from './setup/setup.service.js';

const consoleFolder = fileURLToPath(new URL('../../console/dist', import.meta.url));

function readConfig(): Config {
  try {
    return parseConfig(process.env, consoleFolder);
  } catch (error) {
    if (!(error instanceof ConfigError)) throw error;
    console.error(error.message);
    process.exit(1);
  }
}

async function start(config: Config): Promise<void> {
  const app = await NestFactory.create<NestExpressApplication>(AppModule.register(config), {
    // Without this an idle keep-alive connection would hold the end up for seconds.
    forceCloseConnections: true,
    logger: ['error', 'warn', 'log'],
    bodyParser: false,
  });
  setUpHttp(app, config);
  app.enableShutdownHooks(['SIGTERM', 'SIGINT']);
  await app.listen(config.port, config.host);
  console.log(`Cresthold listens at ${await app.getUrl()}`);
  const code = await app.get(SetupService).currentCode();
  if (code !== null) console.log(`No account exists yet. Set-up code for the first administrator: ${code}`);
}

await start(readConfig());
