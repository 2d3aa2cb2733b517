import { cleanup, configure } from '@testing-library/react';
import { afterEach, beforeEach, vi } from 'vitest';

/** jsdom draws nothing: a chart only has to be made and taken down. */
vi.mock('uplot', () => ({
  default: class {
    width = 0;
    setData() {}
    setScale() {}
    setSize() {}
    batch(change: () => void) {
      change();
    }
    destroy() {}
  },
}));

/**
 * A busy machine may need long for a page; what is awaited still ends the test where it never comes.
 * Roles are looked up without computing what is visible, which takes most of the time in jsdom.
 */
configure({ asyncUtilTimeout: 10_000, defaultHidden: true });

class NoResize {
  observe() {}
  unobserve() {}
  disconnect() {}
}

/** Every request that a test did not foresee fails it. */
export const unhandled: string[] = [];

beforeEach(() => {
  unhandled.length = 0;
  vi.stubGlobal('ResizeObserver', NoResize);
  // jsdom has no canvas and says so at each try.
  vi.spyOn(HTMLCanvasElement.prototype, 'getContext').mockReturnValue(null);
  vi.stubGlobal('matchMedia', (query: string) => ({
    matches: false,
    media: query,
    addListener() {},
    removeListener() {},
    addEventListener() {},
    removeEventListener() {},
  }));
});

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
  if (unhandled.length > 0) throw new Error(`Requests without a handler: ${unhandled.join(', ')}`);
});
