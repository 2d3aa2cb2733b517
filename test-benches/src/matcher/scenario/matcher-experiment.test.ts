import { preflight } from '@cresthold/shared';
import { expect, it } from 'vitest';
import { shippedDocuments } from '../../kit/scenario-entry.fixture.js';
import { matcherEntry } from './matcher-entry.js';
import { describeMatcherExperiment } from './matcher-experiment.fixture.js';

it('has no fault that preflight finds', () => {
  const { experiment, ...documents } = shippedDocuments(matcherEntry({ host: '127.0.0.1', port: 1 }));
  const grid = { step: 0.01, origin: 0 };
  const grids = new Map([
    ['shunt', grid],
    ['series', grid],
  ]);
  expect(preflight({ ...documents, graph: experiment.graph, grids })).toEqual([]);
});

describeMatcherExperiment(3, 1);
