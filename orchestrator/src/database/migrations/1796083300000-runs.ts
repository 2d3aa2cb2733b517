import type { MigrationInterface, QueryRunner } from 'typeorm';

const tables = [
  `CREATE TABLE "run" ("id" text PRIMARY KEY NOT NULL, "rigId" text NOT NULL, "experimentId" text NOT NULL,
    "experimentVersion" integer NOT NULL, "experimentTitle" text NOT NULL, "envelopeVersion" integer NOT NULL,
    "status" text NOT NULL, "verdict" text, "reason" text, "startedAt" text NOT NULL, "endedAt" text,
    "startedBy" text NOT NULL, "scans" integer NOT NULL DEFAULT (0), "results" text NOT NULL,
    "warnings" text NOT NULL, "fileSha256" text, "idempotencyKey" text,
    CONSTRAINT "rig_of_run" FOREIGN KEY ("rigId") REFERENCES "rig" ("id") ON DELETE RESTRICT)`,
  `CREATE UNIQUE INDEX "one_open_run" ON "run" ("rigId") WHERE "endedAt" IS NULL`,
  `CREATE UNIQUE INDEX "one_run_per_key" ON "run" ("startedBy", "idempotencyKey")`,
  `CREATE INDEX "run_by_rig" ON "run" ("rigId")`,
];

export class Runs1796083300000 implements MigrationInterface {
  name = 'Runs1796083300000';

  async up(runner: QueryRunner): Promise<void> {
    for (const sql of tables) await runner.query(sql);
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('DROP TABLE "run"');
  }
}
