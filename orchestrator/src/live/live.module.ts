import { Module } from '@nestjs/common';
import { AuthModule } from '../auth/auth.module.js';
import { RecordingsModule } from '../recordings/recordings.module.js';
import { RigHostsModule } from '../rig-hosts/rig-hosts.module.js';
import { LiveHub } from './live-hub.js';
import { LiveRelay } from './live-relay.js';
import { LiveServer } from './live.server.js';

/** Live data over one WebSocket per reader. */
@Module({
  imports: [AuthModule, RecordingsModule, RigHostsModule],
  providers: [LiveHub, LiveRelay, LiveServer],
})
export class LiveModule {}
