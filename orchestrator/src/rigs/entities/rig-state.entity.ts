import type { Trip } from '@cresthold/shared';
import { Column, Entity, JoinColumn, ManyToOne, PrimaryColumn } from 'typeorm';

/** What must survive a restart whatever else is lost: the latched trip. */
@Entity('rig_state')
export class RigStateEntity {
  @PrimaryColumn('text')
  rigId!: string;

  @Column('simple-json', { nullable: true })
  trip!: Trip | null;

  /** Keeps the database from holding a state of a rig that it does not know. */
  @ManyToOne('RigEntity', { nullable: false, onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'rigId', foreignKeyConstraintName: 'rig_of_state' })
  readonly rig?: unknown;
}
