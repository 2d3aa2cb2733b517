import { Module } from '@nestjs/common';
import { TypeOrmModule } from '@nestjs/typeorm';
import { UserEntity } from './entities/user.entity.js';
import { UserStore } from './user-store.js';

/** Reading of accounts, apart from `UsersModule` because signing in needs it and that module needs signing in. */
@Module({
  imports: [TypeOrmModule.forFeature([UserEntity])],
  providers: [UserStore],
  exports: [UserStore],
})
export class UserStoreModule {}
