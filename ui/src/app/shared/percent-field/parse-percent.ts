/** Reads `12.5` or `12.5%` as the share 0.125, without the dust that dividing doubles leaves. */
export function parsePercent(typed: string): { readonly share: number } | { readonly fault: string } {
  const match = /^([-\u2212]?)(\d*)(?:\.(\d*))?\s*%?$/.exec(typed.trim());
  const [, sign = '', whole = '', places = ''] = match ?? [];
  if (match === null || whole + places === '') return { fault: 'Type a percentage such as 12.5.' };
  return { share: Number(`${sign === '' ? '' : '-'}${whole || '0'}.${places}e-2`) };
}

/** A share as it is typed: `12.5`. */
export function typedPercent(share: number): string {
  return Number.isFinite(share) ? String(Number(`${share}e2`)).replace('-', '\u2212') : '';
}
