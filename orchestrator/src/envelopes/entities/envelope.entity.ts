import type { EnvelopeContent, EnvelopeStatus } from '@cresthold/shared';
import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, Unique } from 'typeorm';

@Entity('envelope')
@Unique('one_envelope_per_version', ['rigId', 'version'])
// The database itself refuses a second envelope in force for one rig.
@Index('one_envelope_in_force', ['rigId'], { unique: true, where: `"status" = 'in-force'` })
export class EnvelopeEntity {
  @PrimaryColumn('text')
  id!: string;

  @Column('text')
  rigId!: string;

  @Column('integer')
  version!: number;

  @Column('text')
  status!: EnvelopeStatus;

  /** Counts changes of the draft. */
  @Column('integer')
  revision!: number;

  @Column('text')
  author!: string;

  @Column('text', { nullable: true })
  submittedBy!: string | null;

  @Column('text', { nullable: true })
  decidedBy!: string | null;

  /** Reason of the decision. */
  @Column('text', { nullable: true })
  reason!: string | null;

  @Column('text')
  createdAt!: string;

  @Column('text', { nullable: true })
  decidedAt!: string | null;

  @Column('simple-json')
  content!: EnvelopeContent;

  /** Keeps the database from holding a envelope of a rig that it does not know. */
  @ManyToOne('RigEntity', { nullable: false, onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'rigId', foreignKeyConstraintName: 'rig_of_envelope' })
  readonly rig?: unknown;
}
