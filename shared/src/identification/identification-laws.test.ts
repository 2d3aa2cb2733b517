import { describeIdentificationLaws } from './identification-laws.fixture.js';

describeIdentificationLaws(300, 60_000);
