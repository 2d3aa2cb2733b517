import { describe, it } from 'vitest';
import { describeAdapterLeaks } from '../conformance/describe-adapter-conformance.js';
import { inMemoryFixture } from './in-memory-conformance.fixture.js';

describeAdapterLeaks(inMemoryFixture, { describe, it });
