import { it } from 'vitest';
import { answerAnyRequest } from '../kit/answer-any-request.fixture.js';
import { pulserBench } from './pulser-bench.js';

it('answers any request to the pulser, and what it refuses has changed nothing', () => {
  answerAnyRequest(pulserBench, 200);
});
