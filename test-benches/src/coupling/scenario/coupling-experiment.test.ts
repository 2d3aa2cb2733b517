import { describeCouplingExperiment } from './coupling-experiment.fixture.js';

describeCouplingExperiment(3);
