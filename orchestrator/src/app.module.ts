import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { Module, type DynamicModule } from '@nestjs/common';
import { ServeStaticModule } from '@nestjs/serve-static';
import { AuthModule } from './auth/auth.module.js';
import { ConfigModule } from './config/config.module.js';
import type { Config } from './config/config.schema.js';
import { DatabaseModule } from './database/database.module.js';
import { ProblemDetailsModule } from './problem-details/problem-details.module.js';
import { SetupModule } from './setup/setup.module.js';
import { UsersModule } from './users/users.module.js';

/** The whole server. Each feature is a module of its own and is listed here. */
@Module({})
export class AppModule {
  static register(config: Config): DynamicModule {
    return {
      module: AppModule,
      imports: [
        ConfigModule.register(config),
        DatabaseModule,
        ProblemDetailsModule,
        AuthModule,
        SetupModule,
        UsersModule,
        ...consoleModules(config),
      ],
    };
  }
}

/** Serves the built console, with every path that is no file and no API answered by its page. */
function consoleModules(config: Config): DynamicModule[] {
  if (!existsSync(join(config.consoleFolder, 'index.html'))) return [];
  return [
    ServeStaticModule.forRoot({
      rootPath: config.consoleFolder,
      exclude: ['/api/{*rest}', '/assets/{*rest}'],
      serveStaticOptions: { setHeaders: setCaching },
    }),
  ];
}

/** Built assets carry a digest in their names and never change; everything else is asked for anew. */
function setCaching(response: { setHeader: (name: string, value: string) => void }, path: string): void {
  const isAsset = path.includes(`${join('/', 'assets')}/`);
  response.setHeader('Cache-Control', isAsset ? 'public, max-age=31536000, immutable' : 'no-cache');
}
