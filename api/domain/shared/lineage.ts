const LONGEST = 100;

/**
 * A stable name for random numbers, made of words once and shared by all versions of a thing: lower-case letters, digits
 * and hyphens. Two things may come out alike; who stores them makes the later one differ.
 */
export function lineageOf(...words: readonly string[]): string {
  const plain = words
    .join(' ')
    .normalize('NFKD')
    .replaceAll(/\p{M}/gu, '')
    .toLowerCase()
    .replaceAll(/[^a-z0-9]+/g, '-')
    .slice(0, LONGEST)
    .replaceAll(/^-+|-+$/g, '');
  return plain.length >= 3 ? plain : `${plain}-table`.replace(/^-/, '');
}
