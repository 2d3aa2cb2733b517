import { Module } from '@nestjs/common';
import { TerminusModule } from '@nestjs/terminus';
import { RigHostsModule } from '../rig-hosts/rig-hosts.module.js';
import { HealthController } from './health.controller.js';
import { RigHostsHealth } from './rig-hosts.health.js';

@Module({
  imports: [TerminusModule.forRoot({ logger: false }), RigHostsModule],
  controllers: [HealthController],
  providers: [RigHostsHealth],
})
export class HealthModule {}
