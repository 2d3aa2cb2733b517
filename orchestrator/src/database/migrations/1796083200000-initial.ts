import type { MigrationInterface, QueryRunner } from 'typeorm';

const tables = [
  `CREATE TABLE "user" ("account" text PRIMARY KEY NOT NULL, "title" text NOT NULL, "roles" text NOT NULL,
    "passwordHash" text NOT NULL, "isEnabled" boolean NOT NULL DEFAULT (1),
    "sessionGeneration" integer NOT NULL DEFAULT (1), "createdAt" text NOT NULL)`,

  `CREATE TABLE "rig" ("id" text PRIMARY KEY NOT NULL, "revision" integer NOT NULL, "content" text NOT NULL,
    "createdAt" text NOT NULL, "changedAt" text NOT NULL)`,

  `CREATE TABLE "rig_state" ("rigId" text PRIMARY KEY NOT NULL, "trip" text, "lockout" text,
    CONSTRAINT "rig_of_state" FOREIGN KEY ("rigId") REFERENCES "rig" ("id") ON DELETE RESTRICT)`,

  `CREATE TABLE "envelope" ("id" text PRIMARY KEY NOT NULL, "rigId" text NOT NULL, "version" integer NOT NULL,
    "status" text NOT NULL, "revision" integer NOT NULL, "author" text NOT NULL, "submittedBy" text,
    "decidedBy" text, "reason" text, "createdAt" text NOT NULL, "decidedAt" text, "content" text NOT NULL,
    CONSTRAINT "one_envelope_per_version" UNIQUE ("rigId", "version"),
    CONSTRAINT "rig_of_envelope" FOREIGN KEY ("rigId") REFERENCES "rig" ("id") ON DELETE RESTRICT)`,
  `CREATE UNIQUE INDEX "one_envelope_in_force" ON "envelope" ("rigId") WHERE "status" = 'in-force'`,

  `CREATE TABLE "objective" ("id" text PRIMARY KEY NOT NULL, "rigId" text NOT NULL, "revision" integer NOT NULL,
    "content" text NOT NULL, "createdAt" text NOT NULL, "createdBy" text NOT NULL,
    CONSTRAINT "rig_of_objective" FOREIGN KEY ("rigId") REFERENCES "rig" ("id") ON DELETE RESTRICT)`,
  `CREATE INDEX "objective_by_rig" ON "objective" ("rigId")`,

  `CREATE TABLE "experiment" ("id" text PRIMARY KEY NOT NULL, "rigId" text NOT NULL, "title" text NOT NULL,
    "latestVersion" integer NOT NULL, "createdAt" text NOT NULL, "createdBy" text NOT NULL,
    CONSTRAINT "rig_of_experiment" FOREIGN KEY ("rigId") REFERENCES "rig" ("id") ON DELETE RESTRICT)`,
  `CREATE INDEX "experiment_by_rig" ON "experiment" ("rigId")`,

  `CREATE TABLE "experiment_version" ("experimentId" text NOT NULL, "version" integer NOT NULL,
    "basedOn" integer, "note" text NOT NULL, "createdAt" text NOT NULL, "createdBy" text NOT NULL,
    "content" text NOT NULL,
    CONSTRAINT "experiment_of_version" FOREIGN KEY ("experimentId") REFERENCES "experiment" ("id")
      ON DELETE RESTRICT,
    PRIMARY KEY ("experimentId", "version"))`,

  `CREATE TABLE "audit" ("id" integer PRIMARY KEY AUTOINCREMENT NOT NULL, "at" text NOT NULL,
    "account" text NOT NULL, "action" text NOT NULL, "rigId" text, "subject" text, "reason" text)`,
  `CREATE INDEX "audit_by_rig" ON "audit" ("rigId")`,
];

/** What may never change, held by the database itself. */
const guards = [
  ...['UPDATE', 'DELETE'].map(
    (act) => `CREATE TRIGGER "audit_no_${act.toLowerCase()}" BEFORE ${act} ON "audit"
      BEGIN SELECT RAISE(ABORT, 'the audit log is append-only'); END`,
  ),
  ...['UPDATE', 'DELETE'].map(
    (
      act,
    ) => `CREATE TRIGGER "experiment_version_no_${act.toLowerCase()}" BEFORE ${act} ON "experiment_version"
      BEGIN SELECT RAISE(ABORT, 'a version of an experiment never changes'); END`,
  ),
];

/** People, rigs, envelopes, objectives, experiments and the audit log. */
export class Initial1796083200000 implements MigrationInterface {
  async up(runner: QueryRunner): Promise<void> {
    for (const statement of [...tables, ...guards]) await runner.query(statement);
  }

  async down(runner: QueryRunner): Promise<void> {
    const names = ['audit', 'experiment_version', 'experiment', 'objective', 'envelope', 'rig_state', 'rig'];
    for (const name of [...names, 'user']) await runner.query(`DROP TABLE "${name}"`);
  }
}
