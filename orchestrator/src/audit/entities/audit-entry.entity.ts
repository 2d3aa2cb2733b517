import { Column, Entity, Index, PrimaryGeneratedColumn } from 'typeorm';

/** One safety-relevant act. Rows are only ever added: triggers in the database refuse anything else. */
@Entity('audit')
export class AuditEntry {
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
}
