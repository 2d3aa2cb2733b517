export { BypassBanner } from './bypass-banner.js';
export { LiveTraces } from './traces/live-traces.js';
export { rigKeys, rigsQuery, rigQuery, useRig, useRigs } from './api/rig-queries.js';
export { RigInViewProvider, useRigIdInView, useShowsRig } from './rig-in-view.js';
export { useLockouts } from './api/lockouts.js';
export { SafetyStrip } from './safety-strip.js';
