import { describe, it } from 'vitest';
import { describeAdapterLeaks } from '../conformance/describe-adapter-conformance.js';
import { modbusRtuFixture } from './modbus-rtu.fixture.js';

describeAdapterLeaks(modbusRtuFixture, {
  describe,
  it: (title, body) => {
    it(title, { timeout: 300_000 }, body);
  },
});
