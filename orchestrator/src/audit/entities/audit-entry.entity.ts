import { Column, Entity, Index, PrimaryGeneratedColumn } from 'typeorm';

/** One safety-relevant act. Rows are only ever added: triggers in the database refuse anything else. */
@Entity('audit')
export class AuditEntry {
  /** Counts from 1 without a gap. */
  @PrimaryGeneratedColumn()
  id!: number;

  /** ISO 8601 with milliseconds, UTC. */
  @Column('text')
  at!: string;

  /** Who did it; `server` where no person did. */
  @Column('text')
  account!: string;

  /** What, in the past tense, e.g. `envelope.approved`. */
  @Column('text')
  action!: string;

  @Index('audit_by_rig')
  @Column('text', { nullable: true })
  rigId!: string | null;

  /** What it was done to, e.g. the id of an envelope. */
  @Column('text', { nullable: true })
  subject!: string | null;

  @Column('text', { nullable: true })
  reason!: string | null;

  /** What it was before and what it became, as JSON; null where that is not kept. */
  @Column('text', { nullable: true })
  before!: string | null;

  @Column('text', { nullable: true })
  after!: string | null;

  /** Hash of the entry before. */
  @Column('text')
  previousHash!: string;

  /** See `hashOf`. */
  @Column('text')
  hash!: string;
}
