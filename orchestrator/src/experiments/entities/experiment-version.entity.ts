import { migrateExperiment, type ExperimentContent } from '@cresthold/shared';
import { Column, Entity, JoinColumn, ManyToOne, PrimaryColumn } from 'typeorm';

/** One version of an experiment; never changed: a trigger in the database refuses it. */
@Entity('experiment_version')
export class ExperimentVersionEntity {
  @PrimaryColumn('text')
  experimentId!: string;

  @PrimaryColumn('integer')
  version!: number;

  /** The version that was open when this one was made; null for the first. */
  @Column('integer', { nullable: true })
  basedOn!: number | null;

  @Column('text')
  note!: string;

  @Column('text')
  createdAt!: string;

  @Column('text')
  createdBy!: string;

  /** Kept as it was written; what an earlier release wrote is read in the form of today. */
  @Column('simple-json', {
    transformer: { from: migrateExperiment, to: (content: ExperimentContent) => content },
  })
  content!: ExperimentContent;

  /** Keeps the database from holding a version of an experiment that it does not know. */
  @ManyToOne('ExperimentEntity', { nullable: false, onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'experimentId', foreignKeyConstraintName: 'experiment_of_version' })
  readonly experiment?: unknown;
}
