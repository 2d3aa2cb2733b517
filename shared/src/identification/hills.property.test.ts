import { describeHillLaws } from './hills.property.fixture.js';

describeHillLaws(300, 60_000);
