import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn } from 'typeorm';

@Entity('experiment')
export class ExperimentEntity {
  @PrimaryColumn('text')
  id!: string;

  @Index('experiment_by_rig')
  @Column('text')
  rigId!: string;

  /** Title of the latest version. */
  @Column('text')
  title!: string;

  @Column('integer')
  latestVersion!: number;

  @Column('text')
  createdAt!: string;

  @Column('text')
  createdBy!: string;

  /** Keeps the database from holding a experiment of a rig that it does not know. */
  @ManyToOne('RigEntity', { nullable: false, onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'rigId', foreignKeyConstraintName: 'rig_of_experiment' })
  readonly rig?: unknown;
}
