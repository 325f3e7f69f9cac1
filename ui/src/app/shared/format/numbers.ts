/** A true minus sign: as wide as the plus, and not to be taken for a hyphen. */
export const MINUS = '\u2212';

const withMinus = (text: string): string => text.replace('-', MINUS);

const SCALES = [
  { from: 1e9, divisor: 1e9, letters: 'bn' },
  { from: 1e6, divisor: 1e6, letters: 'm' },
  { from: 1e3, divisor: 1e3, letters: 'k' },
] as const;

/** An amount as it is read at a glance, at four figures at most: 12.5m, 1.25bn, −340k. */
export function shortAmount(amount: number, locale: string): string {
  if (!Number.isFinite(amount)) return '–';
  const size = Math.abs(amount);
  // 999,950 rounds to a million and is written as one.
  const scale = SCALES.find((one) => Number((size / one.divisor).toPrecision(4)) >= 1);
  const divided = size / (scale?.divisor ?? 1);
  const digits = new Intl.NumberFormat(locale, {
    maximumSignificantDigits: divided >= 1000 ? 4 : 3,
    useGrouping: false,
  }).format(divided);
  return (amount < 0 && Number(digits) !== 0 ? MINUS : '') + digits + (scale?.letters ?? '');
}

/** Every digit of an amount; decimal text keeps the digits that a double would lose. */
export function exactAmount(amount: number | string, locale: string): string {
  const value = typeof amount === 'string' ? (amount as Intl.StringNumericLiteral) : amount;
  return withMinus(new Intl.NumberFormat(locale, { maximumFractionDigits: 4 }).format(value));
}

/** A share as a percentage, with a fixed count of decimals so that columns align. */
export function percent(share: number, locale: string, decimals = 2): string {
  if (!Number.isFinite(share)) return '–';
  return withMinus(
    new Intl.NumberFormat(locale, {
      style: 'percent',
      minimumFractionDigits: decimals,
      maximumFractionDigits: decimals,
    }).format(share),
  );
}

/** A plain figure with a fixed count of decimals. */
export function figure(value: number, locale: string, decimals = 0): string {
  if (!Number.isFinite(value)) return '–';
  return withMinus(
    new Intl.NumberFormat(locale, {
      minimumFractionDigits: decimals,
      maximumFractionDigits: decimals,
    }).format(value),
  );
}
