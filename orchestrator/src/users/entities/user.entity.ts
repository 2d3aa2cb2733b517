import type { Role } from '@cresthold/shared';
import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('user')
export class UserEntity {
  @PrimaryColumn('text')
  account!: string;

  @Column('text')
  title!: string;

  @Column('simple-json')
  roles!: Role[];

  @Column('text')
  passwordHash!: string;

  @Column('boolean', { default: true })
  isEnabled!: boolean;

  /** Part of every session; raising it ends all sessions of the account. */
  @Column('integer', { default: 1 })
  sessionGeneration!: number;

  @Column('text')
  createdAt!: string;
}
