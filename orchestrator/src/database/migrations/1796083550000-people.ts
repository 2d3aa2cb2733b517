import type { MigrationInterface, QueryRunner } from 'typeorm';

const steps = [
  `CREATE TABLE "session" ("id" text PRIMARY KEY NOT NULL, "tokenHash" text NOT NULL, "previousTokenHash" text,
    "account" text NOT NULL, "userAgent" text NOT NULL, "address" text NOT NULL, "beganAt" text NOT NULL,
    "lastSeenAt" text NOT NULL, "renewedAt" text NOT NULL, "elevatedUntil" text)`,
  `CREATE UNIQUE INDEX "session_by_token" ON "session" ("tokenHash")`,
  `CREATE INDEX "session_by_account" ON "session" ("account")`,
  `CREATE TABLE "second_factor" ("account" text PRIMARY KEY NOT NULL, "sealedSecret" text NOT NULL,
    "confirmedAt" text, "lastStep" integer NOT NULL, "recoveryHashes" text NOT NULL)`,
  `ALTER TABLE "user" ADD COLUMN "rigLimits" text NOT NULL DEFAULT ('[]')`,
  `ALTER TABLE "user" ADD COLUMN "isPasswordShort" boolean NOT NULL DEFAULT (0)`,
];

/** Sessions, second factors and rights per rig. */
export class People1796083550000 implements MigrationInterface {
  name = 'People1796083550000';

  async up(runner: QueryRunner): Promise<void> {
    for (const sql of steps) await runner.query(sql);
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('ALTER TABLE "user" DROP COLUMN "isPasswordShort"');
    await runner.query('ALTER TABLE "user" DROP COLUMN "rigLimits"');
    await runner.query('DROP TABLE "second_factor"');
    await runner.query('DROP TABLE "session"');
  }
}
