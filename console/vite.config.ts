import react from '@vitejs/plugin-react';
import { defineConfig } from 'vitest/config';

const target = process.env['CRESTHOLD_SERVER'] ?? 'http://127.0.0.1:4380';

export default defineConfig({
  plugins: [react()],
  resolve: { conditions: ['source', 'module', 'browser', 'development|production'] },
  server: { host: '127.0.0.1', proxy: { '/api': { target, ws: true } } },
  build: {
    chunkSizeWarningLimit: 800,
    // The core only declares: what a page does not use of it (the expression parser, say) is left out.
    rolldownOptions: { treeshake: { moduleSideEffects: [{ test: /\/shared\/src\//, sideEffects: false }] } },
  },
  test: {
    name: 'console',
    environment: 'jsdom',
    include: ['src/**/*.test.{ts,tsx}'],
    setupFiles: ['src/testing/setup.ts'],
    testTimeout: 20_000,
  },
});
