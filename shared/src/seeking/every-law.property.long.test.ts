import { describeEveryLaw } from './every-law.property.fixture.js';

describeEveryLaw(10_000);
