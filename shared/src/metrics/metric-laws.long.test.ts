import { describeMetricLaws } from './metric-laws.fixture.js';

describeMetricLaws(10_000, 1_200_000);
