import { describeBurnerExperiment } from './burner-experiment-runs.fixture.js';

describeBurnerExperiment(20, 20);
