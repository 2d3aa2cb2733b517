import { describe, it } from 'vitest';
import { describeAdapterLeaks } from '../conformance/describe-adapter-conformance.js';
import { serialTextFixture } from './serial-text-conformance.fixture.js';

describeAdapterLeaks(serialTextFixture, {
  describe,
  it: (title, body) => {
    it(title, body, 600_000);
  },
});
