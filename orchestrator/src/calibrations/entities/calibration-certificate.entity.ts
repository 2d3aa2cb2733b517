import { Column, Entity, JoinColumn, OneToOne, PrimaryColumn } from 'typeorm';

/** The uploaded certificate of a calibration, kept apart so that lists do not read it. */
@Entity('calibration_certificate')
export class CalibrationCertificateEntity {
  @PrimaryColumn('text')
  calibrationId!: string;

  @Column('text')
  mediaType!: string;

  @Column('text')
  sha256!: string;

  @Column('integer')
  bytes!: number;

  @Column('blob')
  data!: Buffer;

  @OneToOne('CalibrationEntity', { nullable: false, onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'calibrationId', foreignKeyConstraintName: 'calibration_of_certificate' })
  readonly calibration?: unknown;
}
