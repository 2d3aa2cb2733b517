import { Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { EnvelopeEntity } from './entities/envelope.entity.js';
import { EnvelopeStore } from './envelope-store.js';

/** Reading of envelopes, apart from `EnvelopesModule` because the rig hosts need it and that module needs the hosts. */
@Module({
  imports: [TypeOrmModule.forFeature([EnvelopeEntity])],
  providers: [EnvelopeStore],
  exports: [EnvelopeStore],
})
export class EnvelopeStoreModule {}
