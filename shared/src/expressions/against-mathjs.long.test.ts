import { describeAgainstMathjs } from './against-mathjs.fixture.js';

describeAgainstMathjs(50_000, 1_200_000);
