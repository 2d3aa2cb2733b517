import { LiveHub } from './live-hub.js';
import type { LiveSocket } from './live-client.js';

/** The hub on the browser's own socket, clock and frames. */
export function createBrowserHub(): LiveHub {
  return new LiveHub({
    connect: () => new WebSocket(liveUrl()) as unknown as LiveSocket,
    after: (delayMs, callback) => {
      const timer = setTimeout(callback, delayMs);
      return () => clearTimeout(timer);
    },
    random: Math.random,
    requestFrame: requestFrameOrTimer,
    nowMs: () => Date.now(),
  });
}

function liveUrl(): string {
  const scheme = location.protocol === 'https:' ? 'wss' : 'ws';
  return `${scheme}://${location.host}/api/v1/live`;
}

/** Hidden tabs get no frames; their stores still move on, once a second. */
function requestFrameOrTimer(callback: () => void): void {
  if (document.hidden) setTimeout(callback, 1000);
  else requestAnimationFrame(callback);
}
