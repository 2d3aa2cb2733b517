import { describeMetricLaws } from './metric-laws.fixture.js';

describeMetricLaws(300, 60_000);
