import { expect, it } from 'vitest';
import { preflightShipped } from '../../kit/preflight-shipped.fixture.js';
import { couplingEntry } from './coupling-entry.js';
import { describeCouplingExperiment } from './coupling-experiment.fixture.js';

it('ships experiments in which preflight finds nothing', () => {
  expect(preflightShipped(couplingEntry({ path: '/dev/ttyUSB0' }))).toEqual([]);
});

describeCouplingExperiment(3, 1);
