export { createBrowserHub } from './browser-hub.js';
export type { LinkState } from './live-client.js';
export {
  LiveProvider,
  useIsStale,
  useLatestValue,
  useLinkState,
  useLiveHub,
  useLiveTraces,
  useRigSamples,
  useRigStatus,
  useRigStatuses,
  useRunMessages,
} from './live-context.js';
export { LiveHub, type RunChange, type RunListener } from './live-hub.js';
export { RingBuffer } from './ring-buffer.js';
export { RigSamples } from './sample-store.js';
export { type ChannelTraces, TraceStore } from './trace-store.js';
