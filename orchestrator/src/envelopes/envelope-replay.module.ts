import { Module } from '@nestjs/common';
import { RecordingsModule } from '../recordings/recordings.module.js';
import { RigStoreModule } from '../rigs/rig-store.module.js';
import { EnvelopeReplayController } from './envelope-replay.controller.js';
import { EnvelopeReplayService } from './envelope-replay.service.js';

/** Drafts on recorded runs: apart from `EnvelopesModule`, which works without any record. */
@Module({
  imports: [RecordingsModule, RigStoreModule],
  controllers: [EnvelopeReplayController],
  providers: [EnvelopeReplayService],
})
export class EnvelopeReplayModule {}
