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
module.exports = {
  projects: [
    server('unit', ['<rootDir>/{api,db,worker,fixtures}/**/*.spec.ts']),
    server('server', ['<rootDir>/test/{api,db,worker,reference}/**/*.spec.ts'], {
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
