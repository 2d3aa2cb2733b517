import { Column, Entity, PrimaryColumn } from 'typeorm';

/** An account's authenticator (RFC 6238) with its recovery codes. */
@Entity('second_factor')
export class SecondFactorEntity {
  @PrimaryColumn('text')
  account!: string;

  /** The shared secret, encrypted with the key of the data folder. */
  @Column('text')
  sealedSecret!: string;

  /** Null until a first code has shown that the authenticator has the secret. */
  @Column('text', { nullable: true })
  confirmedAt!: string | null;

  /** Time step of the last code taken: it and those before it are refused from then on. */
  @Column('integer')
  lastStep!: number;

  /** SHA-256 of the recovery codes that are left, hex. */
  @Column('simple-json')
  recoveryHashes!: string[];
}
