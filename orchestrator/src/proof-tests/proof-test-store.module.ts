import { Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { EnvelopeStoreModule } from '../envelopes/envelope-store.module.js';
import { ProofTestEntity } from './entities/proof-test.entity.js';
import { ProofTestDues } from './proof-test-dues.service.js';
import { ProofTestStore } from './proof-test-store.js';

/** What arming and runs need of proof tests, apart from `ProofTestsModule`, which needs rig hosts in turn. */
@Module({
  imports: [EnvelopeStoreModule, TypeOrmModule.forFeature([ProofTestEntity])],
  providers: [ProofTestStore, ProofTestDues],
  exports: [ProofTestStore, ProofTestDues],
})
export class ProofTestStoreModule {}
