import { expect, it } from 'vitest';
import { preflightShipped } from '../../kit/preflight-shipped.fixture.js';
import { mixerEntry } from './mixer-entry.js';
import { describeMixerExperiments } from './mixer-experiment.fixture.js';

it('ships experiments in which preflight finds nothing', () => {
  expect(preflightShipped(mixerEntry({ host: '127.0.0.1', port: 1 }))).toEqual([]);
});

describeMixerExperiments(3, 1);
