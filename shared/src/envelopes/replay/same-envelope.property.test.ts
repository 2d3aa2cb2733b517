import { testSameEnvelope } from './same-envelope.property.fixture.js';

testSameEnvelope(60);
