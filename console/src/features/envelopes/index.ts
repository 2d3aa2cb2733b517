export { envelopeKeys, envelopesQuery, useEnvelopeInForce, useEnvelopes } from './api/envelope-queries.js';
