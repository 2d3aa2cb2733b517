import type { Rig } from '@cresthold/shared';
import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('rig')
export class RigEntity {
  @PrimaryColumn('text')
  id!: string;

  @Column('integer')
  revision!: number;

  @Column('simple-json')
  content!: Rig;

  @Column('text')
  createdAt!: string;

  @Column('text')
  changedAt!: string;
}
