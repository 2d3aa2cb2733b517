import { Module } from '@nestjs/common';
import { RigStoreModule } from '../rigs/rig-store.module.js';
import { TripHistoryModule } from './trip-history.module.js';
import { TripsController } from './trips.controller.js';

@Module({ imports: [RigStoreModule, TripHistoryModule], controllers: [TripsController] })
export class TripsModule {}
