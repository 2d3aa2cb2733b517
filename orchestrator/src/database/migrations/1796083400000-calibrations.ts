import type { MigrationInterface, QueryRunner } from 'typeorm';

const tables = [
  `CREATE TABLE "calibration" ("id" text PRIMARY KEY NOT NULL, "rigId" text NOT NULL, "channel" text NOT NULL,
    "version" integer NOT NULL, "status" text NOT NULL, "author" text NOT NULL, "createdAt" text NOT NULL,
    "endedAt" text, "content" text NOT NULL,
    CONSTRAINT "one_calibration_per_version" UNIQUE ("rigId", "channel", "version"),
    CONSTRAINT "rig_of_calibration" FOREIGN KEY ("rigId") REFERENCES "rig" ("id") ON DELETE RESTRICT)`,
  `CREATE UNIQUE INDEX "one_calibration_in_force" ON "calibration" ("rigId", "channel") WHERE "status" = 'in-force'`,
  `CREATE TABLE "calibration_certificate" ("calibrationId" text PRIMARY KEY NOT NULL, "mediaType" text NOT NULL,
    "sha256" text NOT NULL, "bytes" integer NOT NULL, "data" blob NOT NULL,
    CONSTRAINT "calibration_of_certificate" FOREIGN KEY ("calibrationId") REFERENCES "calibration" ("id")
      ON DELETE RESTRICT)`,
];

export class Calibrations1796083400000 implements MigrationInterface {
  name = 'Calibrations1796083400000';

  async up(runner: QueryRunner): Promise<void> {
    for (const sql of tables) await runner.query(sql);
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('DROP TABLE "calibration_certificate"');
    await runner.query('DROP TABLE "calibration"');
  }
}
