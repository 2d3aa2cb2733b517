export { envelopeKeys, envelopesQuery, useEnvelopeInForce, useEnvelopes } from './api/envelope-queries.js';
export { marginTo, simpleThreshold, type SimpleThreshold } from './simple-threshold.js';
