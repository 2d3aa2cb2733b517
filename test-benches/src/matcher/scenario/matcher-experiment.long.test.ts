import { describeMatcherExperiment } from './matcher-experiment.fixture.js';

describeMatcherExperiment(20, 20);
