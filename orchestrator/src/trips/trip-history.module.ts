import { Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { RigTripEntity } from './entities/rig-trip.entity.js';
import { TripHistory } from './trip-history.js';

/** Keeping of trips, apart from `TripsModule` because the rig hosts need it. */
@Module({
  imports: [TypeOrmModule.forFeature([RigTripEntity])],
  providers: [TripHistory],
  exports: [TripHistory],
})
export class TripHistoryModule {}
