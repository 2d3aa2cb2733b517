import { Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { RigLockoutEntity } from './entities/rig-lockout.entity.js';
import { RigStateEntity } from './entities/rig-state.entity.js';
import { RigEntity } from './entities/rig.entity.js';
import { RigStore } from './rig-store.js';

/** Reading of rigs, apart from `RigsModule` because the rig hosts need it and that module needs the hosts. */
@Module({
  imports: [TypeOrmModule.forFeature([RigEntity, RigLockoutEntity, RigStateEntity])],
  providers: [RigStore],
  exports: [RigStore],
})
export class RigStoreModule {}
