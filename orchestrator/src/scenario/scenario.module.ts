import { Module } from '@nestjs/common';
import { EnvelopesModule } from '../envelopes/envelopes.module.js';
import { ExperimentsModule } from '../experiments/experiments.module.js';
import { ObjectivesModule } from '../objectives/objectives.module.js';
import { RigsModule } from '../rigs/rigs.module.js';
import { UserStoreModule } from '../users/user-store.module.js';
import { UsersModule } from '../users/users.module.js';
import { ScenarioLoader } from './scenario.loader.js';

@Module({
  imports: [EnvelopesModule, ExperimentsModule, ObjectivesModule, RigsModule, UserStoreModule, UsersModule],
  providers: [ScenarioLoader],
  exports: [ScenarioLoader],
})
export class ScenarioModule {}
