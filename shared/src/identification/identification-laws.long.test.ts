import { describeIdentificationLaws } from './identification-laws.fixture.js';

describeIdentificationLaws(10_000, 1_200_000);
