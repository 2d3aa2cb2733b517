/**
 * All that the author of an adapter needs, from one place: `@cresthold/adapters/plug-in`. The kit that checks the
 * adapter is at `@cresthold/adapters/conformance`.
 */
export { DomainError, type ErrorCode, type FieldFault } from '@cresthold/shared';
export { z } from 'zod';
export { CallQueue } from './call-queue.js';
export * from './contract.js';
export { fieldFaultsOf, parseOrMisconfigured } from './parse-or-misconfigured.js';
