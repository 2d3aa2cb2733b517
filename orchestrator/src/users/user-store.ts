import { Injectable } from '@nestjs/common';
import { InjectRepository } from '@nestjs/typeorm';
import { MoreThan, type Repository } from 'typeorm';
import { UserEntity } from './entities/user.entity.js';

/** Reads accounts. */
@Injectable()
export class UserStore {
  constructor(@InjectRepository(UserEntity) private readonly users: Repository<UserEntity>) {}

  find(account: string): Promise<UserEntity | null> {
    return this.users.findOneBy({ account });
  }

  async hasAny(): Promise<boolean> {
    return (await this.users.count({ take: 1 })) > 0;
  }

  /** Accounts in the order of their names, after `afterAccount`. */
  list(afterAccount: string, limit: number): Promise<UserEntity[]> {
    return this.users.find({
      where: { account: MoreThan(afterAccount) },
      order: { account: 'ASC' },
      take: limit,
    });
  }
}
