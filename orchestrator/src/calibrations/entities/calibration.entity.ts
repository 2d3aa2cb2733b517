import type { CalibrationContent } from '@cresthold/shared';
import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, Unique } from 'typeorm';
import type { CalibrationStatus } from '../dto/calibration.dto.js';

@Entity('calibration')
@Unique('one_calibration_per_version', ['rigId', 'channel', 'version'])
// The database itself refuses a second calibration in force for one sensor.
@Index('one_calibration_in_force', ['rigId', 'channel'], { unique: true, where: `"status" = 'in-force'` })
export class CalibrationEntity {
  @PrimaryColumn('text')
  id!: string;

  @Column('text')
  rigId!: string;

  @Column('text')
  channel!: string;

  /** Number among the calibrations of the sensor, from 1. */
  @Column('integer')
  version!: number;

  @Column('text')
  status!: CalibrationStatus;

  @Column('text')
  author!: string;

  @Column('text')
  createdAt!: string;

  @Column('text', { nullable: true })
  endedAt!: string | null;

  @Column('simple-json')
  content!: CalibrationContent;

  @ManyToOne('RigEntity', { nullable: false, onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'rigId', foreignKeyConstraintName: 'rig_of_calibration' })
  readonly rig?: unknown;
}
