import type { ConformanceFixture, TestRunner } from './conformance-fixture.js';
import { type Check, withSetting } from './conformance-setting.js';
import { faultChecks } from './fault-checks.js';
import { lifecycleChecks, openingChecks } from './lifecycle-checks.js';
import { valueChecks } from './value-checks.js';

/**
 * Defines the tests that every adapter must pass, for the duties of `contract.ts`.
 *
 * @param runner the `describe` and `it` of the plug-in's test runner
 * @example
 * describeAdapterConformance(myFixture, { describe, it });
 */
export function describeAdapterConformance<Configuration, Address>(
  fixture: ConformanceFixture<Configuration, Address>,
  runner: TestRunner,
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
    for (const provocation of fixture.provokes) define(faultChecks[provocation]);
  });
}
