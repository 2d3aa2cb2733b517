import { describeMixerExperiments } from './mixer-experiment.fixture.js';

describeMixerExperiments(20, 20);
