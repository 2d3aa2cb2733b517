import type { PreflightFault, RunStatus, Verdict } from '@cresthold/shared';
import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn } from 'typeorm';

/** One execution of one experiment version on one rig; its samples are in a file of its own. */
@Entity('run')
// The database itself refuses a second open run on one rig.
@Index('one_open_run', ['rigId'], { unique: true, where: '"endedAt" IS NULL' })
@Index('one_run_per_key', ['startedBy', 'idempotencyKey'], { unique: true })
export class RunEntity {
  @PrimaryColumn('text')
  id!: string;

  @Index('run_by_rig')
  @Column('text')
  rigId!: string;

  @Column('text')
  experimentId!: string;

  @Column('integer')
  experimentVersion!: number;

  @Column('text')
  experimentTitle!: string;

  @Column('integer')
  envelopeVersion!: number;

  @Column('text')
  status!: RunStatus;

  /** Null until the end. */
  @Column('text', { nullable: true })
  verdict!: Verdict | null;

  /** Why it ended. */
  @Column('text', { nullable: true })
  reason!: string | null;

  /** ISO 8601 with milliseconds, UTC. */
  @Column('text')
  startedAt!: string;

  /** When the server knew of the end; null while the run is open. */
  @Column('text', { nullable: true })
  endedAt!: string | null;

  @Column('text')
  startedBy!: string;

  /** Rows in the run file; 0 until the end. */
  @Column('integer', { default: 0 })
  scans!: number;

  @Column('simple-json')
  results!: Record<string, number>;

  /** What preflight warned of. */
  @Column('simple-json')
  warnings!: PreflightFault[];

  /** Of the sealed file, hexadecimal; null until it is sealed. */
  @Column('text', { nullable: true })
  fileSha256!: string | null;

  /** What the client called the request to start; the same key never starts a second run. */
  @Column('text', { nullable: true })
  idempotencyKey!: string | null;

  /** Keeps the database from holding a run of a rig that it does not know. */
  @ManyToOne('RigEntity', { nullable: false, onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'rigId', foreignKeyConstraintName: 'rig_of_run' })
  readonly rig?: { id: string };
}
