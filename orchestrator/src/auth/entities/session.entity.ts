import { Column, Entity, Index, PrimaryColumn } from 'typeorm';

/** One place where somebody is signed in. The token itself is in the browser only. */
@Entity('session')
export class SessionEntity {
  /** Public name of the session, to end it by. */
  @PrimaryColumn('text')
  id!: string;

  /** SHA-256 of the token, hex. */
  @Index('session_by_token', { unique: true })
  @Column('text')
  tokenHash!: string;

  /** Hash of the token before the last renewal, which is good for requests that were on their way. */
  @Column('text', { nullable: true })
  previousTokenHash!: string | null;

  @Index('session_by_account')
  @Column('text')
  account!: string;

  /** What the browser or script calls itself. */
  @Column('text')
  userAgent!: string;

  /** Where the last sign-in of the session came from. */
  @Column('text')
  address!: string;

  @Column('text')
  beganAt!: string;

  @Column('text')
  lastSeenAt!: string;

  /** When the token was renewed last. */
  @Column('text')
  renewedAt!: string;

  /** Until when acts that need the password again are allowed; null where it was not given. */
  @Column('text', { nullable: true })
  elevatedUntil!: string | null;
}
