import { describeWildSequencer } from './wild-sequencer.fixture.js';

describeWildSequencer(10_000, 1_200_000);
