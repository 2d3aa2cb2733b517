import { describeKills } from './kill-suite.js';

describeKills(1);
