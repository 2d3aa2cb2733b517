import { describeCouplingExperiment } from './coupling-experiment.fixture.js';

describeCouplingExperiment(20, 20);
