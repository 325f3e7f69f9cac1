import { demand } from '../model/refusal';

/** A line on a slip. */
export interface WrittenLine {
  /** Share of 100%, above 0, 1 at most. */
  readonly written: number;
  /** "To stand": it is not signed down. */
  readonly toStand: boolean;
}

/**
 * Signed lines of a slip. Written to more than the order, the lines are signed down in proportion until they fill it;
 * lines to stand keep what they wrote, and the others share what they leave. A slip written to its order or less is signed
 * as written: no line is signed up.
 * @param order what is placed, a share of 100% as the lines are: above 0, 1 at most
 * @returns signed lines, shares of 100%, in the order of the lines
 * @throws EngineInputError for an order or a line out of its bounds, or where lines to stand exceed the order
 */
export function signedLines(lines: readonly WrittenLine[], order: number): number[] {
  demand(order > 0 && order <= 1, 'The order', order, 'above 0 and 1 at most');
  lines.forEach(({ written }, i) => {
    demand(written > 0 && written <= 1, `Written line ${i + 1}`, written, 'above 0 and 1 at most');
  });
  const sumOf = (toStand: boolean): number =>
    lines.reduce((sum, line) => (line.toStand === toStand ? sum + line.written : sum), 0);
  const standing = sumOf(true);
  const others = sumOf(false);
  // Lines that fill the order must not be refused for the last bit of their sum.
  demand(
    standing <= order * (1 + 1e-12),
    'The sum of the lines to stand',
    standing,
    `the order at most, ${order}`,
  );
  const left = Math.max(order - standing, 0);
  const factor = others > left ? left / others : 1;
  return lines.map(({ written, toStand }) => (toStand ? written : written * factor));
}
