import { it } from 'vitest';
import { answerAnyRequest } from '../kit/answer-any-request.fixture.js';
import { couplingBench } from './coupling-bench.js';

it('answers any request to the coupling, and what it refuses has changed nothing', () => {
  answerAnyRequest(couplingBench, 300);
});
