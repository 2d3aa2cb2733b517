import { Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { RigStateEntity } from './entities/rig-state.entity.js';
import { RigEntity } from './entities/rig.entity.js';
import { RigStore } from './rig-store.js';

/** Reading of rigs, apart from `RigsModule` because the rig hosts need it and that module needs the hosts. */
@Module({
  imports: [TypeOrmModule.forFeature([RigEntity, RigStateEntity])],
  providers: [RigStore],
  exports: [RigStore],
})
export class RigStoreModule {}
