import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { NestFactory } from '@nestjs/core';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { AppModule } from './app.module.js';
import { parseConfig } from './config/config.schema.js';
import { apiPrefix } from './http/api-prefix.js';
import { openApiDocument } from './http/open-api.js';

/** Writes the OpenAPI document to a file without listening: `node dist/openapi.js openapi.json`. */
async function writeDocument(file: string): Promise<void> {
  const dataFolder = mkdtempSync(join(tmpdir(), 'cresthold-openapi-'));
  try {
    const config = parseConfig({ CRESTHOLD_DATA: dataFolder }, dataFolder);
    const app = await NestFactory.create<NestExpressApplication>(AppModule.register(config), {
      logger: ['error', 'warn'],
    });
    app.setGlobalPrefix(apiPrefix);
    writeFileSync(file, `${JSON.stringify(openApiDocument(app), null, 2)}\n`);
    await app.close();
  } finally {
    rmSync(dataFolder, { recursive: true, force: true });
  }
}

const file = process.argv[2];
if (file === undefined) {
  console.error('Usage: node dist/openapi.js FILE');
  process.exit(2);
}
await writeDocument(file);
