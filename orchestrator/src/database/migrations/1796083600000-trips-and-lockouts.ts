import type { MigrationInterface, QueryRunner } from 'typeorm';

const steps = [
  `CREATE TABLE "rig_lockout" ("id" text PRIMARY KEY NOT NULL, "rigId" text NOT NULL, "by" text NOT NULL,
    "reason" text NOT NULL, "at" text NOT NULL, "mayLift" text NOT NULL,
    CONSTRAINT "one_lockout_per_person" UNIQUE ("rigId", "by"),
    CONSTRAINT "rig_of_lockout" FOREIGN KEY ("rigId") REFERENCES "rig" ("id") ON DELETE RESTRICT)`,
  `INSERT INTO "rig_lockout" ("id", "rigId", "by", "reason", "at", "mayLift")
    SELECT lower(hex(randomblob(16))), "rigId", json_extract("lockout", '$.by'),
      json_extract("lockout", '$.reason'), json_extract("lockout", '$.at'), '[]'
    FROM "rig_state" WHERE "lockout" IS NOT NULL AND "lockout" <> 'null'`,
  `ALTER TABLE "rig_state" DROP COLUMN "lockout"`,
  `CREATE TABLE "rig_trip" ("id" text PRIMARY KEY NOT NULL, "rigId" text NOT NULL, "at" text NOT NULL,
    "trip" text NOT NULL, "resetAt" text, "resetBy" text, "resetReason" text, "timesToRest" text,
    "trajectory" text,
    CONSTRAINT "rig_of_trip" FOREIGN KEY ("rigId") REFERENCES "rig" ("id") ON DELETE RESTRICT)`,
  `CREATE INDEX "trip_by_rig" ON "rig_trip" ("rigId", "id")`,
];

/** Every trip with how its stop went, and lockouts of several people at once. */
export class TripsAndLockouts1796083600000 implements MigrationInterface {
  name = 'TripsAndLockouts1796083600000';

  async up(runner: QueryRunner): Promise<void> {
    for (const sql of steps) await runner.query(sql);
  }

  /** Of several lockouts the oldest stays: a rig that was held stays so. */
  async down(runner: QueryRunner): Promise<void> {
    await runner.query('DROP TABLE "rig_trip"');
    await runner.query('ALTER TABLE "rig_state" ADD COLUMN "lockout" text');
    await runner.query(
      `INSERT OR IGNORE INTO "rig_state" ("rigId") SELECT DISTINCT "rigId" FROM "rig_lockout"`,
    );
    await runner.query(`UPDATE "rig_state" SET "lockout" = (
      SELECT json_object('by', "by", 'reason', "reason", 'at', "at") FROM "rig_lockout"
      WHERE "rig_lockout"."rigId" = "rig_state"."rigId" ORDER BY "at" LIMIT 1)`);
    await runner.query('DROP TABLE "rig_lockout"');
  }
}
