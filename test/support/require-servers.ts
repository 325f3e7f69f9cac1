/** Before any test that needs servers: says how to get them, instead of failing with a refused connection. */
const missing = ['TEST_DATABASE_URL', 'TEST_DATABASE_OWNER_URL', 'TEST_SEALER_DATABASE_URL', 'TEST_REDIS_URL', 'TEST_DATA_DIR'].filter(
  (name) => (process.env[name] ?? '') === '',
);
if (missing.length > 0) {
  throw new Error(
    `This test needs servers (${missing.join(', ')} not set). Run it by: npm test -- path/to/file.spec.ts, which starts them.`,
  );
}
