import { Module, type DynamicModule } from '@nestjs/common';
import { AdaptersModule } from './adapters/adapters.module.js';
import { AuthModule } from './auth/auth.module.js';
import { CalibrationsModule } from './calibrations/calibrations.module.js';
import { ConfigModule } from './config/config.module.js';
import type { Config } from './config/config.schema.js';
import { DatabaseModule } from './database/database.module.js';
import { EnvelopeReplayModule } from './envelopes/envelope-replay.module.js';
import { EnvelopesModule } from './envelopes/envelopes.module.js';
import { ExperimentsModule } from './experiments/experiments.module.js';
import { HealthModule } from './health/health.module.js';
import { InterlocksModule } from './interlocks/interlocks.module.js';
import { LiveModule } from './live/live.module.js';
import { LockoutsModule } from './lockouts/lockouts.module.js';
import { NotificationsModule } from './notifications/notifications.module.js';
import { ObjectivesModule } from './objectives/objectives.module.js';
import { ProblemDetailsModule } from './problem-details/problem-details.module.js';
import { ProofTestsModule } from './proof-tests/proof-tests.module.js';
import { RigHostsModule } from './rig-hosts/rig-hosts.module.js';
import { NoRigHostsModule } from './rigs/no-rig-hosts.module.js';
import { RigsModule } from './rigs/rigs.module.js';
import { RunsModule } from './runs/runs.module.js';
import { ScenarioModule } from './scenario/scenario.module.js';
import { SetupModule } from './setup/setup.module.js';
import { TripsModule } from './trips/trips.module.js';
import { UsersModule } from './users/users.module.js';

/** Documents and people: everything that works without driving a rig. */
const documentModules = [
  AdaptersModule,
  AuthModule,
  CalibrationsModule,
  EnvelopesModule,
  ExperimentsModule,
  ObjectivesModule,
  RigsModule,
  SetupModule,
  UsersModule,
];

/** What drives rigs and follows them: provides `RigHostsPort`. */
const drivingModules = [
  RigHostsModule,
  LockoutsModule,
  TripsModule,
  RunsModule,
  InterlocksModule,
  ProofTestsModule,
  EnvelopeReplayModule,
  LiveModule,
  HealthModule,
  NotificationsModule,
];

/** The whole server. Each feature is a module of its own and is listed above. */
@Module({})
export class AppModule {
  static register(config: Config): DynamicModule {
    return {
      module: AppModule,
      imports: [
        ConfigModule.register(config),
        DatabaseModule,
        ProblemDetailsModule,
        ...documentModules,
        ...drivingModules,
      ],
    };
  }

  /** Documents and people alone, for command lines that fill a data folder while no server runs on it. */
  static registerWithoutRigHosts(config: Config): DynamicModule {
    return {
      module: AppModule,
      imports: [
        ConfigModule.register(config),
        DatabaseModule,
        ...documentModules,
        ScenarioModule,
        NoRigHostsModule,
      ],
    };
  }
}
