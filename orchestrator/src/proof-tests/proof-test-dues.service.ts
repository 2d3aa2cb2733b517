import { Injectable } from '@nestjs/common';
import { DomainError } from '@cresthold/shared';
import { EnvelopeStore } from '../envelopes/envelope-store.js';
import type { ProofTestDue } from './dto/proof-test.dto.js';
import { forbidsArming, proofTestDue } from './proof-test-due.js';
import { ProofTestStore } from './proof-test-store.js';
import { toProofTest } from './proof-test.mapper.js';

/**
 * Which interlocks in force have to be tested. The server judges this, and not the rig host: dates are wall time,
 * which decides nothing in a scan, and there is one way by which people arm.
 */
@Injectable()
export class ProofTestDues {
  constructor(
    private readonly envelopes: EnvelopeStore,
    private readonly tests: ProofTestStore,
  ) {}

  /** Every interlock in force that asks for proof tests, in the envelope's order. */
  async list(rigId: string, nowMs: number = Date.now()): Promise<ProofTestDue[]> {
    const inForce = await this.envelopes.inForce(rigId);
    if (inForce === null) return [];
    const { decidedAt, createdAt } = await this.envelopes.get(inForce.id);
    const inForceAtMs = Date.parse(decidedAt ?? createdAt);
    const dues: ProofTestDue[] = [];
    for (const interlock of inForce.content.interlocks) {
      if (interlock.proofTestEveryDays === null) continue;
      const signed = await this.tests.signed(rigId, interlock.id);
      const due = proofTestDue(interlock, signed, inForceAtMs, nowMs);
      if (due === null) continue;
      dues.push({
        interlock: interlock.id,
        title: interlock.title,
        state: due.state,
        lastTest: due.lastTest ? toProofTest(due.lastTest) : null,
        dueAt: new Date(due.dueAtMs).toISOString(),
        forbidsArmingAt: new Date(due.forbidsArmingAtMs).toISOString(),
      });
    }
    return dues;
  }

  /** @throws proof-test.overdue naming each interlock whose proof test forbids arming */
  async requireInDate(rigId: string): Promise<void> {
    const faults = (await this.list(rigId))
      .filter(({ state }) => forbidsArming(state))
      .map(({ interlock, title, state }) => ({
        field: `interlocks.${interlock}`,
        message:
          state === 'failed'
            ? `The last proof test of "${title}" failed: mend it and test it again.`
            : `The proof test of "${title}" is overdue: do it first.`,
      }));
    if (faults.length > 0) throw new DomainError('proof-test.overdue', undefined, faults);
  }
}
