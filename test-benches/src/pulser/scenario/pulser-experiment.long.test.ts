import { describePulserExperiments } from './pulser-experiment.fixture.js';

describePulserExperiments(20, 20);
