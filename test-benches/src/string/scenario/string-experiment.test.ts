import { describeStringExperiments } from './string-experiment.fixture.js';

describeStringExperiments(3);
