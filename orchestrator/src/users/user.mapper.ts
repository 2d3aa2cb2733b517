import type { User } from './dto/user.dto.js';
import type { UserEntity } from './entities/user.entity.js';

export function toUser({ account, title, roles, rigLimits, isEnabled, createdAt }: UserEntity): User {
  return { account, title, roles, rigLimits, isEnabled, createdAt };
}
