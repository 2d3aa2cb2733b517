import { preflight } from '@cresthold/shared';
import { expect, it } from 'vitest';
import { shippedDocuments } from '../../kit/scenario-entry.fixture.js';
import { pulserEntry } from './pulser-entry.js';
import { describePulserExperiments } from './pulser-experiment.fixture.js';

it.each(['find-pulse', 'seek-energy'])('has no fault that preflight finds: %s', (key) => {
  const { experiment, ...documents } = shippedDocuments(pulserEntry({ host: '127.0.0.1', port: 1 }), key);
  const grids = new Map([
    ['drive', { step: 0.01, origin: 0 }],
    ['delay', { step: 0.1, origin: 0 }],
  ]);
  expect(preflight({ ...documents, graph: experiment.graph, grids })).toEqual([]);
});

describePulserExperiments(3, 1);
