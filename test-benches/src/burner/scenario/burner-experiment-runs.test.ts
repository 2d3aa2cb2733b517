import { describeBurnerExperiment } from './burner-experiment-runs.fixture.js';

describeBurnerExperiment(3, 1);
