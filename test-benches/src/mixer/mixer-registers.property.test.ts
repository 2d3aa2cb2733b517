import { it } from 'vitest';
import { answerAnyRequest } from '../kit/answer-any-request.fixture.js';
import { mixerBench } from './mixer-bench.js';

it('answers any request to the mixer, and what it refuses has changed nothing', () => {
  answerAnyRequest(mixerBench, 300);
});
