import { describeSignalLaws } from './signal-laws.fixture.js';

describeSignalLaws(10_000, 1_200_000);
