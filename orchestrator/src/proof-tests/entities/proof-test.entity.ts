import type { Interlock } from '@cresthold/shared';
import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn } from 'typeorm';
import type { ProofTestMethod, ProofTestOutcome, ProofTestStatus } from '../dto/proof-test.dto.js';

/** One proof test of one interlock, from its beginning to its signature. */
@Entity('proof_test')
@Index('proof_test_by_rig', ['rigId'])
// The database itself refuses a second open proof test on one rig.
@Index('one_open_proof_test', ['rigId'], { unique: true, where: `"status" = 'open'` })
export class ProofTestEntity {
  @PrimaryColumn('text')
  id!: string;

  @Column('text')
  rigId!: string;

  @Column('text')
  envelopeId!: string;

  @Column('integer')
  envelopeVersion!: number;

  @Column('text')
  interlock!: string;

  /** The interlock as it was tested: one that was changed since has to be proven again. */
  @Column('simple-json')
  definition!: Interlock;

  @Column('text')
  method!: ProofTestMethod;

  @Column('text')
  status!: ProofTestStatus;

  @Column('text')
  startedBy!: string;

  @Column('text')
  startedAt!: string;

  /** Longest response that is expected, ms. */
  @Column('real')
  limitMs!: number;

  /** When its condition became true; null before. */
  @Column('text', { nullable: true })
  conditionAt!: string | null;

  /** As the rig host measured it, ms; null before. */
  @Column('real', { nullable: true })
  responseMs!: number | null;

  /** Actuators that were written when it acted. */
  @Column('integer', { nullable: true })
  writes!: number | null;

  @Column('text', { nullable: true })
  outcome!: ProofTestOutcome | null;

  @Column('text', { nullable: true })
  note!: string | null;

  @Column('text', { nullable: true })
  signedBy!: string | null;

  @Column('text', { nullable: true })
  signedAt!: string | null;

  @ManyToOne('RigEntity', { nullable: false, onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'rigId', foreignKeyConstraintName: 'rig_of_proof_test' })
  readonly rig?: unknown;
}
