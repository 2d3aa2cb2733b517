import { defineConfig } from 'vitest/config';

// The whole product: real server, real rig host, real bench process, Chromium in front.
export default defineConfig({
  ssr: { resolve: { conditions: ['source', 'module', 'node', 'import', 'default'] } },
  test: {
    name: 'e2e',
    include: ['console/e2e/**/*.e2e.ts'],
    environment: 'node',
    fileParallelism: false,
    testTimeout: 240_000,
    hookTimeout: 60_000,
  },
});
