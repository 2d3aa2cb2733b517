import { defineConfig } from 'vitest/config';

const node = (name: string) => ({
  ssr: { resolve: { conditions: ['source', 'module', 'node', 'import', 'default'] } },
  test: {
    name,
    include: [`${name}/src/**/*.test.ts`],
    exclude: [...(process.env['CRESTHOLD_LONG'] ? [] : ['**/*.long.test.ts']), '**/node_modules/**'],
    environment: 'node' as const,
  },
});

export default defineConfig({
  test: { projects: [node('shared'), node('adapters'), node('test-benches'), 'console'] },
});
