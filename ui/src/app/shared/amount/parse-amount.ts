export type Parsed = { readonly text: string } | { readonly fault: string };

/** How many places each ending moves the decimal point. */
const ENDINGS: Readonly<Record<string, number>> = {
  '': 0,
  k: 3,
  thousand: 3,
  m: 6,
  mn: 6,
  million: 6,
  b: 9,
  bn: 9,
  billion: 9,
};
const MOST_DIGITS = 15;
const MOST_PLACES = 4;

/** Moves the point to the right without ever going through a double, which would lose digits. */
function shift(whole: string, places: string, by: number): string {
  const digits = whole + places.padEnd(by, '0');
  const point = whole.length + by;
  const left = digits.slice(0, point).replace(/^0+(?=\d)/, '');
  const right = digits.slice(point).replace(/0+$/, '');
  return right === '' ? left : `${left}.${right}`;
}

/**
 * Reads an amount as people type it (12.5m, 0.125bn, 250k, 12,500,000) into decimal text of at most four places.
 * Commas and spaces group; the point divides.
 */
export function parseAmount(typed: string): Parsed {
  const match = /^(\d*)(?:\.(\d*))?([a-z]*)$/.exec(
    typed
      .trim()
      .toLowerCase()
      .replace(/[,\s'\u00a0\u202f_]/g, ''),
  );
  const [, whole = '', places = '', ending = ''] = match ?? [];
  if (/^[-\u2212]/.test(typed.trim())) return { fault: 'An amount is 0 or more.' };
  if (match === null || whole + places === '')
    return { fault: 'Type an amount such as 12.5m, 250k or 12,500,000.' };
  const by = ENDINGS[ending];
  if (by === undefined) return { fault: `“${ending}” is not known: k is thousand, m million, bn billion.` };
  if (/,\d{1,2}$/.test(typed.trim())) return { fault: 'Use a point for decimals; commas group thousands.' };
  const text = shift(whole === '' ? '0' : whole, places, by);
  const [left = '', right = ''] = text.split('.');
  if (left.length > MOST_DIGITS) return { fault: 'This is larger than the desk can hold.' };
  if (right.length > MOST_PLACES) return { fault: 'An amount has four decimals at most.' };
  return { text };
}

/** Decimal text as it is typed: in millions where nothing is lost, otherwise with its thousands grouped. */
export function typedAmount(text: string, locale: string): string {
  const match = /^(\d+)(?:\.(\d+))?$/.exec(text);
  if (match === null) return text;
  const [, whole = '', places = ''] = match;
  for (const [letters, by] of [
    ['bn', 9],
    ['m', 6],
    ['k', 3],
  ] as const) {
    const head = whole.slice(0, -by);
    const tail = whole.slice(-by).replace(/0+$/, '');
    if (head !== '' && places === '' && tail.length <= 3)
      return tail === '' ? head + letters : `${head}.${tail}${letters}`;
  }
  return new Intl.NumberFormat(locale, { maximumFractionDigits: 4 }).format(
    text as Intl.StringNumericLiteral,
  );
}
