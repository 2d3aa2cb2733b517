import { interlockSchema, type Interlock } from '@cresthold/shared';
import { proofTestDue, type SignedTest } from '../../src/proof-tests/proof-test-due.js';

const day = 86_400_000;
const inForceAt = Date.parse('2026-03-01T00:00:00Z');
const lock = (change: object = {}): Interlock =>
  interlockSchema.parse({
    ...{ id: 'hot', title: 'Hot', condition: 'temp > 90', delayS: 0.5, action: 'trip', message: 'Hot.' },
    ...{ proofTestEveryDays: 30, proofTestGraceDays: 7, ...change },
  });
const signed = (days: number, change: Partial<SignedTest> = {}): SignedTest => ({
  definition: lock(),
  outcome: 'pass',
  signedAt: new Date(inForceAt + days * day).toISOString(),
  ...change,
});
const stateAt = (days: number, tests: SignedTest[], interlock = lock()) =>
  proofTestDue(interlock, tests, inForceAt, inForceAt + days * day)?.state;

describe('the date of the next proof test', () => {
  it('is none where the envelope asks for none', () => {
    expect(proofTestDue(lock({ proofTestEveryDays: null }), [], inForceAt, inForceAt)).toBeNull();
  });

  it('of one never tested is the day on which it came in force, and the grace counts from there', () => {
    expect([stateAt(0, []), stateAt(6.9, []), stateAt(7, [])]).toEqual(['due', 'due', 'overdue']);
    expect(stateAt(0, [], lock({ proofTestGraceDays: 0 }))).toBe('overdue');
  });

  it('counts from the signature, with a warning two weeks before', () => {
    // Signed on day 1: due on day 31, warned of from day 17, forbids arming from day 38.
    const states = [16.9, 17, 30.9, 31, 37.9, 38].map((days) => stateAt(days, [signed(1)]));
    expect(states).toEqual(['in-date', 'due-soon', 'due-soon', 'due', 'due', 'overdue']);
  });

  it('is at once and without grace after a failed test, until one passes', () => {
    expect(stateAt(2, [signed(2, { outcome: 'fail' }), signed(1)])).toBe('failed');
    expect(stateAt(3, [signed(3), signed(2, { outcome: 'fail' })])).toBe('in-date');
  });

  it.each([
    { condition: 'temp > 95' },
    { delayS: 1 },
    { action: 'stop' },
    { clearDelayS: 2 },
    { isLatching: true },
  ])('is at once for an interlock that is another than the one tested: %o', (change) => {
    expect(stateAt(8, [signed(1, { definition: lock(change) })])).toBe('overdue');
  });

  it('is not touched by another title, message or interval', () => {
    const definition = lock({ title: 'Other', message: 'Other.', proofTestEveryDays: 90 });
    expect(stateAt(8, [signed(1, { definition })])).toBe('in-date');
  });
});
