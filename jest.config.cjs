/** Two worlds: the server side in Node, the screens in jsdom. `npm test` runs both; a path runs one file. */
const { existsSync } = require('node:fs');
const { join } = require('node:path');
const server = (displayName, testMatch, extra = {}) => ({
  displayName,
  testEnvironment: 'node',
  testMatch,
  transform: { '^.+\\.ts$': ['ts-jest', { tsconfig: 'tsconfig.jest.json' }] },
  ...extra,
});
const PUBLISHED = '<rootDir>/test/reference/published/**/*.spec.ts';
module.exports = {
  projects: [
    // What is published is held against the functions alone: it needs no servers.
    server('unit', ['<rootDir>/{api,db,worker,fixtures}/**/*.spec.ts', PUBLISHED]),
    server('server', ['<rootDir>/test/{api,db,worker,reference}/**/*.spec.ts'], {
      testPathIgnorePatterns: ['/node_modules/', '<rootDir>/test/reference/published/'],
      setupFiles: ['<rootDir>/test/support/require-servers.ts'],
    }),
    server('accuracy', ['<rootDir>/test/accuracy/**/*.spec.ts'], {
      setupFiles: ['<rootDir>/test/support/require-servers.ts'],
    }),
    server('faults', ['<rootDir>/test/faults/**/*.spec.ts'], {
      setupFiles: ['<rootDir>/test/support/require-servers.ts'],
    }),
    server('e2e', ['<rootDir>/test/e2e/**/*.spec.ts'], {
      setupFiles: ['<rootDir>/test/support/require-servers.ts'],
    }),
    ...(existsSync(join(__dirname, 'ui/jest.config.cjs')) ? ['<rootDir>/ui/jest.config.cjs'] : []),
  ],
};
