import { describeWildSequencer } from './wild-sequencer.fixture.js';

describeWildSequencer(200, 60_000);
