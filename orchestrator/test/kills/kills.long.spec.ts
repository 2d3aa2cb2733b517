import { describeKills } from './kill-suite.js';

describeKills(10);
