import { describeSignalLaws } from './signal-laws.fixture.js';

describeSignalLaws(300, 60_000);
