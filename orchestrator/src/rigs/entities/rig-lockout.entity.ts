import { Column, Entity, JoinColumn, ManyToOne, PrimaryColumn, Unique } from 'typeorm';

/** One person's hold on a rig. The rig is free when every one is lifted. */
@Entity('rig_lockout')
@Unique('one_lockout_per_person', ['rigId', 'by'])
export class RigLockoutEntity {
  @PrimaryColumn('text')
  id!: string;

  @Column('text')
  rigId!: string;

  /** Account of the person who set it. */
  @Column('text')
  by!: string;

  @Column('text')
  reason!: string;

  /** ISO 8601, UTC. */
  @Column('text')
  at!: string;

  /** Accounts that may lift it beside that person; where none is named, any safety officer or administrator. */
  @Column('simple-json')
  mayLift!: string[];

  @ManyToOne('RigEntity', { nullable: false, onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'rigId', foreignKeyConstraintName: 'rig_of_lockout' })
  readonly rig?: unknown;
}
