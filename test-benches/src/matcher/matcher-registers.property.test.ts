import { it } from 'vitest';
import { answerAnyRequest } from '../kit/answer-any-request.fixture.js';
import { matcherBench } from './matcher-bench.js';

it('answers any request to the matcher, and what it refuses has changed nothing', () => {
  answerAnyRequest(matcherBench, 200);
});
