import { describeSlidingLaws } from './sliding.property.fixture.js';

describeSlidingLaws(300, 60_000);
