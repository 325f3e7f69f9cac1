import { QueryFailedError } from 'typeorm';

const UNIQUE_VIOLATION = '23505';
const FOREIGN_KEY_VIOLATION = '23503';

function codeOf(error: unknown): string | null {
  if (!(error instanceof QueryFailedError)) return null;
  const driver: unknown = error.driverError;
  return typeof driver === 'object' && driver !== null && 'code' in driver ? String(driver.code) : null;
}

export const isTaken = (error: unknown): boolean => codeOf(error) === UNIQUE_VIOLATION;
export const isUnknownReference = (error: unknown): boolean => codeOf(error) === FOREIGN_KEY_VIOLATION;
