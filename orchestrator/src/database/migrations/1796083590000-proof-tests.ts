import type { MigrationInterface, QueryRunner } from 'typeorm';

const table = `CREATE TABLE "proof_test" ("id" text PRIMARY KEY NOT NULL, "rigId" text NOT NULL,
  "envelopeId" text NOT NULL, "envelopeVersion" integer NOT NULL, "interlock" text NOT NULL,
  "definition" text NOT NULL, "method" text NOT NULL, "status" text NOT NULL, "startedBy" text NOT NULL,
  "startedAt" text NOT NULL, "limitMs" real NOT NULL, "conditionAt" text, "responseMs" real, "writes" integer,
  "outcome" text, "note" text, "signedBy" text, "signedAt" text,
  CONSTRAINT "rig_of_proof_test" FOREIGN KEY ("rigId") REFERENCES "rig" ("id") ON DELETE RESTRICT)`;

/** The record of proof tests. */
export class ProofTests1796083590000 implements MigrationInterface {
  name = 'ProofTests1796083590000';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(table);
    await runner.query('CREATE INDEX "proof_test_by_rig" ON "proof_test" ("rigId")');
    await runner.query(
      `CREATE UNIQUE INDEX "one_open_proof_test" ON "proof_test" ("rigId") WHERE "status" = 'open'`,
    );
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('DROP TABLE "proof_test"');
  }
}
