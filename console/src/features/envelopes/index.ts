export { useProofTestDues } from './api/proof-tests.js';
export { durationText } from './interlock-words.js';
export { dueText, forbidsArming, isPressing } from './proof-tests/due-text.js';
export { ProofTestNotice } from './proof-tests/proof-test-notice.js';
export { envelopeKeys, envelopesQuery, useEnvelopeInForce, useEnvelopes } from './api/envelope-queries.js';
