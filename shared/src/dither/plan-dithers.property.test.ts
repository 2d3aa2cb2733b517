import { describeDitherPlans } from './plan-dithers.property.fixture.js';

describeDitherPlans(300);
