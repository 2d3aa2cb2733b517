// Nest 12 ships ES modules only, so Jest transforms node_modules as well and runs everything as CommonJS.
export default {
  testEnvironment: 'node',
  roots: ['<rootDir>/src', '<rootDir>/test'],
  testRegex: '\\.spec\\.ts$',
  testPathIgnorePatterns: process.env.CRESTHOLD_LONG ? [] : ['\\.long\\.spec\\.ts$'],
  testTimeout: 30_000,
  transform: {
    '^.+\\.[cm]?[tj]s$': [
      '@swc/jest',
      {
        swcrc: false,
        sourceMaps: 'inline',
        module: { type: 'commonjs' },
        jsc: {
          target: 'es2022',
          keepClassNames: true,
          parser: { syntax: 'typescript', decorators: true },
          transform: { legacyDecorator: true, decoratorMetadata: true },
        },
      },
    ],
  },
  transformIgnorePatterns: [],
  moduleNameMapper: { '^(\\.{1,2}/.*)\\.js$': ['$1', '$1.js'] },
};
