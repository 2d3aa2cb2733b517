import { describe, it } from 'vitest';
import { describeAdapterConformance } from '../conformance/describe-adapter-conformance.js';
import { inMemoryFixture } from './in-memory-conformance.fixture.js';

describeAdapterConformance(inMemoryFixture, { describe, it });
