import type { ConformanceFixture, ConformanceOptions, TestRunner } from './conformance-fixture.js';
import { type Check, withSetting } from './conformance-setting.js';
import { faultChecks } from './fault-checks.js';
import { injectedFaultChecks } from './injected-fault-checks.js';
import { checkLeaks } from './leak-checks.js';
import { lifecycleChecks, openingChecks } from './lifecycle-checks.js';
import { offerChecks } from './offer-checks.js';
import { valueChecks } from './value-checks.js';

const defaultCycles = 50;

/**
 * Defines the tests that every adapter must pass, for the duties of `contract.ts`: life cycle, cancellation, values
 * and their quality, every typed error that the fixture can provoke, coming back after a loss, traces, probe and
 * estimate where offered, each fault of the faults wrapper, and that nothing is left open.
 *
 * @param runner the `describe` and `it` of the plug-in's test runner: vitest, jest or node:test
 * @example
 * describeAdapterConformance(myFixture, { describe, it });
 */
export function describeAdapterConformance<Configuration, Address>(
  fixture: ConformanceFixture<Configuration, Address>,
  runner: TestRunner,
  options: ConformanceOptions = {},
): void {
  const define = (checks: Record<string, Check>): void => {
    for (const [title, check] of Object.entries(checks)) {
      runner.it(title, () => withSetting(fixture, check));
    }
  };
  runner.describe(`${fixture.title} keeps the adapter contract`, () => {
    for (const [title, check] of Object.entries(openingChecks)) runner.it(title, () => check(fixture));
    define(lifecycleChecks);
    define(valueChecks);
    define(offerChecks);
    for (const provocation of fixture.provokes) define(faultChecks[provocation]);
    define(injectedFaultChecks);
    defineLeakCheck(fixture, runner, options.cycles ?? defaultCycles);
  });
}

/**
 * Only the check that nothing is left open, for a long suite: a thousand cycles show a leak of a kilobyte each.
 *
 * @param cycles number of openings and closings, and of openings that are aborted
 */
export function describeAdapterLeaks<Configuration, Address>(
  fixture: ConformanceFixture<Configuration, Address>,
  runner: TestRunner,
  cycles = 1000,
): void {
  runner.describe(`${fixture.title} lets go of everything`, () => {
    defineLeakCheck(fixture, runner, cycles);
  });
}

function defineLeakCheck<C, A>(fixture: ConformanceFixture<C, A>, runner: TestRunner, cycles: number): void {
  runner.it(`nothing is left after ${cycles} openings and closings, and as many aborted`, () =>
    checkLeaks(fixture, cycles),
  );
}
