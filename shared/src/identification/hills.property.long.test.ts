import { describeHillLaws } from './hills.property.fixture.js';

describeHillLaws(10_000, 1_200_000);
