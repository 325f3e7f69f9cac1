/** A variable that `npm test` sets. */
export function testVariable(name: string): string {
  const value = process.env[name];
  if (value === undefined || value === '') throw new Error(`${name} is not set; run the test by: npm test -- path/to/file.spec.ts`);
  return value;
}
