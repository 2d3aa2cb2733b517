import { expect, it } from 'vitest';
import { preflightShipped } from '../../kit/preflight-shipped.fixture.js';
import { stringEntry } from './string-entry.js';
import { describeStringExperiments } from './string-experiment.fixture.js';

it('ships experiments in which preflight finds nothing', () => {
  expect(preflightShipped(stringEntry({ path: '/dev/ttyUSB0' }))).toEqual([]);
});

describeStringExperiments(3, 1);
