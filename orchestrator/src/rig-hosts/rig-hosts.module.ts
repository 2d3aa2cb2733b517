import { Global, Module } from '@nestjs/common';
import { AuditModule } from '../audit/audit.module.js';
import { CalibrationStoreModule } from '../calibrations/calibration-store.module.js';
import { EnvelopeStoreModule } from '../envelopes/envelope-store.module.js';
import { ProofTestStoreModule } from '../proof-tests/proof-test-store.module.js';
import { RecordingsModule } from '../recordings/recordings.module.js';
import { RigHostsPort } from '../rigs/rig-hosts.port.js';
import { RigStoreModule } from '../rigs/rig-store.module.js';
import { TripHistoryModule } from '../trips/trip-history.module.js';
import { HostFeed } from './host-feed.js';
import { ChannelProbesController } from './channel-probes.controller.js';
import { LatchedTrips } from './latched-trips.service.js';
import { RigCommandsController } from './rig-commands.controller.js';
import { RigCommandsService } from './rig-commands.service.js';
import { defaultRigHostSettings, RIG_HOST_SETTINGS } from './rig-host-settings.js';
import { RigHostsService } from './rig-hosts.service.js';

/** Supervises one rig host per rig; the only part of the server that talks to rigs. */
@Global()
@Module({
  imports: [
    AuditModule,
    CalibrationStoreModule,
    EnvelopeStoreModule,
    ProofTestStoreModule,
    RecordingsModule,
    RigStoreModule,
    TripHistoryModule,
  ],
  controllers: [RigCommandsController, ChannelProbesController],
  providers: [
    HostFeed,
    LatchedTrips,
    RigCommandsService,
    RigHostsService,
    { provide: RIG_HOST_SETTINGS, useValue: defaultRigHostSettings },
    { provide: RigHostsPort, useExisting: RigHostsService },
  ],
  exports: [HostFeed, RigHostsPort, RigHostsService],
})
export class RigHostsModule {}
