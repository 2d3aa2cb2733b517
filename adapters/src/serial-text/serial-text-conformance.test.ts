import { describe, it } from 'vitest';
import { describeAdapterConformance } from '../conformance/describe-adapter-conformance.js';
import { serialTextFixture } from './serial-text-conformance.fixture.js';

describeAdapterConformance(serialTextFixture, { describe, it });
