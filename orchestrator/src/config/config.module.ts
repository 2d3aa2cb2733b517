import { Module, type DynamicModule } from '@nestjs/common';
import type { Config } from './config.schema.js';

/** Injection token of the `Config`. */
export const CONFIG = Symbol('config');

/** Hands the configuration to every module; parsed once, by whoever starts the server. */
@Module({})
export class ConfigModule {
  static register(config: Config): DynamicModule {
    return {
      module: ConfigModule,
      global: true,
      providers: [{ provide: CONFIG, useValue: config }],
      exports: [CONFIG],
    };
  }
}
