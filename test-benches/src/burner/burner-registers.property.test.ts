import { it } from 'vitest';
import { answerAnyRequest } from '../kit/answer-any-request.fixture.js';
import { burnerBench } from './burner-bench.js';

it('answers any request to the burner, and what it refuses has changed nothing', () => {
  answerAnyRequest(burnerBench, 300);
});
