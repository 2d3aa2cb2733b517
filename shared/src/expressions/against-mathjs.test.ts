import { describeAgainstMathjs } from './against-mathjs.fixture.js';

describeAgainstMathjs(1000, 60_000);
