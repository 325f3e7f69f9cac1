/** Amounts agreed and stored: decimal text with four places at most, reckoned in whole ten-thousandths. */
const PLACES = 4;
const UNIT = 10n ** BigInt(PLACES);
/** Shares and rates enter products with this many places. */
const SHARE_PLACES = 10;
const SHARE_UNIT = 10n ** BigInt(SHARE_PLACES);

/** Ten-thousandths of a unit of currency. */
export type Units = bigint;

export function unitsOf(text: string): Units {
  const match = /^(-?)(\d+)(?:\.(\d{1,4})0*)?$/.exec(text);
  if (match === null) throw new Error(`"${text}" is not an amount`);
  const [, sign, whole = '0', places = ''] = match;
  const units = BigInt(whole) * UNIT + BigInt(places.padEnd(PLACES, '0'));
  return sign === '-' ? -units : units;
}

/** The amount as text, without trailing zeros. */
export function amountOf(units: Units): string {
  const sign = units < 0n ? '-' : '';
  const positive = units < 0n ? -units : units;
  const places = (positive % UNIT).toString().padStart(PLACES, '0').replace(/0+$/, '');
  return `${sign}${positive / UNIT}${places === '' ? '' : `.${places}`}`;
}

/** Amount × share or rate of exchange, rounded half up to a ten-thousandth. Shares of 0 or more. */
export function timesShare(units: Units, share: number): Units {
  const factor = BigInt(Math.round(share * Number(SHARE_UNIT)));
  return (units * factor + SHARE_UNIT / 2n) / SHARE_UNIT;
}

/** For comparing and for words; never for summing. */
export function numberOf(units: Units): number {
  return Number(units) / Number(UNIT);
}

/** An amount in words of the desk: thousands separated, places only where there are any. */
export function amountInWords(units: Units): string {
  const [whole = '0', places] = amountOf(units).split('.');
  const grouped = whole.replace(/\B(?=(\d{3})+$)/g, ',');
  return places === undefined ? grouped : `${grouped}.${places}`;
}
