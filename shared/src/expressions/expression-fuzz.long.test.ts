import { describeExpressionFuzz } from './expression-fuzz.fixture.js';

describeExpressionFuzz(20_000);
