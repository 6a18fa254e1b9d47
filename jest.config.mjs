// One project a workspace: pure code and servers run in Node, screens in jsdom.
const transform = { '^.+\\.(ts|tsx)$': ['@swc/jest'] };
const moduleNameMapper = { '^@strainwright/common/(.*)$': '<rootDir>/../common/src/$1' };
const node = (displayName, rootDir) => ({
  displayName, rootDir, testEnvironment: 'node', transform, moduleNameMapper,
  testMatch: ['<rootDir>/**/*.spec.ts'], testPathIgnorePatterns: ['/node_modules/', '/dist/', '/e2e/'],
});

export default {
  // A slow machine is no fault of the code: only a test that hangs is.
  testTimeout: 60_000,
  projects: [
    node('common', 'common'),
    node('backend', 'backend'),
    node('test', 'test'),
    {
      displayName: 'frontend', rootDir: 'frontend', testEnvironment: 'jsdom', transform,
      moduleNameMapper: { ...moduleNameMapper, '\\.css$': '<rootDir>/src/testing/style-stub.ts' },
      setupFilesAfterEnv: ['<rootDir>/src/testing/setup.ts'],
      testMatch: ['<rootDir>/src/**/*.spec.ts?(x)'],
    },
  ],
};
