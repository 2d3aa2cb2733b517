import type { Role } from '@cresthold/shared';
import { Column, Entity, PrimaryColumn } from 'typeorm';
import type { RigLimit } from '../dto/user.dto.js';

@Entity('user')
export class UserEntity {
  @PrimaryColumn('text')
  account!: string;

  @Column('text')
  title!: string;

  @Column('simple-json')
  roles!: Role[];

  /** Roles that reach the named rigs only; a role that is not listed here reaches all. */
  @Column('simple-json', { default: '[]' })
  rigLimits!: RigLimit[];

  @Column('text')
  passwordHash!: string;

  /** True where the password is long enough beside a second factor only. */
  @Column('boolean', { default: false })
  isPasswordShort!: boolean;

  @Column('boolean', { default: true })
  isEnabled!: boolean;

  /** Of releases that kept no sessions; raised as before, read no more. */
  @Column('integer', { default: 1 })
  sessionGeneration!: number;

  @Column('text')
  createdAt!: string;
}
