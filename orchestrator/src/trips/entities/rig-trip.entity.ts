import type { StopTrajectory, TimeToRest, Trip } from '@cresthold/shared';
import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn } from 'typeorm';

/** One trip of a rig from its first cause to its reset. */
@Entity('rig_trip')
@Index('trip_by_rig', ['rigId', 'id'])
export class RigTripEntity {
  /** In the order of time. */
  @PrimaryColumn('text')
  id!: string;

  @Column('text')
  rigId!: string;

  /** Of the trip itself; tells trips with the same cause apart. */
  @Column('text')
  at!: string;

  @Column('simple-json')
  trip!: Trip;

  @Column('text', { nullable: true })
  resetAt!: string | null;

  @Column('text', { nullable: true })
  resetBy!: string | null;

  @Column('text', { nullable: true })
  resetReason!: string | null;

  /** Null where no host was there to see how the rig came to rest. */
  @Column('simple-json', { nullable: true })
  timesToRest!: TimeToRest[] | null;

  /** Large: read only where one trip is asked for. Null where there is none, or it was too old to be kept. */
  @Column('simple-json', { nullable: true, select: false })
  trajectory!: StopTrajectory | null;

  @ManyToOne('RigEntity', { nullable: false, onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'rigId', foreignKeyConstraintName: 'rig_of_trip' })
  readonly rig?: unknown;
}
