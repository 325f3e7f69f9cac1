/** The screens' specs run in jsdom, through Angular's own compiler. */
const { createCjsPreset } = require('jest-preset-angular/presets');

module.exports = {
  ...createCjsPreset({ tsconfig: '<rootDir>/tsconfig.spec.json' }),
  displayName: 'ui',
  rootDir: __dirname,
  testMatch: ['<rootDir>/src/**/*.spec.ts'],
  setupFilesAfterEnv: ['<rootDir>/jest.setup.ts'],
  moduleNameMapper: {
    '^@leanyear/contract/(.*)$': '<rootDir>/../api/contract/$1',
    '^@leanyear/vocabulary$': '<rootDir>/../api/domain/vocabulary',
  },
};
