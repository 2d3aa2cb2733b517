import type { ObjectiveContent } from '@cresthold/shared';
import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn } from 'typeorm';

@Entity('objective')
export class ObjectiveEntity {
  @PrimaryColumn('text')
  id!: string;

  @Index('objective_by_rig')
  @Column('text')
  rigId!: string;

  @Column('integer')
  revision!: number;

  @Column('simple-json')
  content!: ObjectiveContent;

  @Column('text')
  createdAt!: string;

  @Column('text')
  createdBy!: string;

  /** Keeps the database from holding a objective of a rig that it does not know. */
  @ManyToOne('RigEntity', { nullable: false, onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'rigId', foreignKeyConstraintName: 'rig_of_objective' })
  readonly rig?: unknown;
}
