import { describeSlidingLaws } from './sliding.property.fixture.js';

describeSlidingLaws(10_000, 1_200_000);
