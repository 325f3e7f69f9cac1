import { demand } from '../model/refusal';

/** An individual loss. Any one amount may be in any currency, so long as all are in the same. */
export interface DatedLoss {
  /** When it happened, in whole minutes from a fixed instant. */
  readonly minute: number;
  /** 0 or more. */
  readonly amount: number;
}

/** The losses of one period of consecutive hours: one loss occurrence. */
export interface LossPeriod {
  /** Minute of its first loss, with which it commences. */
  readonly start: number;
  /** What its losses come to. */
  readonly amount: number;
}

/** The losses in order of time. */
function inOrder(losses: readonly DatedLoss[], hours: number): DatedLoss[] {
  demand(hours > 0 && hours < Infinity, 'The number of hours of an hours clause', hours, 'above 0');
  losses.forEach(({ minute, amount }, i) => {
    demand(minute > -Infinity && minute < Infinity, `The minute of loss ${i + 1}`, minute, 'a finite number');
    demand(amount >= 0 && amount < Infinity, `The amount of loss ${i + 1}`, amount, '0 or more');
  });
  return [...losses].sort((a, b) => a.minute - b.minute);
}

/** The period that commences with loss `from`, and the place of the first loss after it. */
function periodFrom(
  ordered: readonly DatedLoss[],
  from: number,
  hours: number,
): LossPeriod & { next: number } {
  const start = ordered[from]?.minute ?? 0;
  let amount = 0;
  let next = from;
  for (
    let loss = ordered[next];
    loss !== undefined && loss.minute < start + 60 * hours;
    loss = ordered[next]
  ) {
    amount += loss.amount;
    next += 1;
  }
  return { start, amount, next };
}

/**
 * Loss occurrences under an hours clause whose periods run from the first loss: the first period commences with the
 * earliest loss, each later one with the first loss after the period before. A loss at the very end of a period's hours
 * belongs to the next.
 * @param hours of a period, above 0: commonly 72 for wind and earthquake, 168 for flood (common practice)
 * @returns the periods in order of time; every loss is in one, none in two
 * @throws EngineInputError for hours not above 0, an undated loss or a negative amount
 */
export function periodsFromFirstLoss(losses: readonly DatedLoss[], hours: number): LossPeriod[] {
  const ordered = inOrder(losses, hours);
  const periods: LossPeriod[] = [];
  for (let at = 0; at < ordered.length;) {
    const { start, amount, next } = periodFrom(ordered, at, hours);
    periods.push({ start, amount });
    at = next;
  }
  return periods;
}

/**
 * Loss occurrences under an hours clause whose periods the cedant may start when it likes: the choice that is worth most
 * to it among all sets of periods that do not overlap, each commencing with a loss. A loss that lies in no chosen period is
 * no part of any occurrence. Found by weighted interval scheduling (J. Kleinberg, É. Tardos, Algorithm Design, 2005,
 * section 6.1), which goes back from the last loss.
 * @param worth what the cedant recovers for an occurrence of an amount, before annual terms: 0 or more
 * @returns the periods in order of time; of choices that are worth the same, the one that commences soonest
 * @throws EngineInputError as `periodsFromFirstLoss`
 */
export function periodsByChoice(
  losses: readonly DatedLoss[],
  hours: number,
  worth: (amount: number) => number,
): LossPeriod[] {
  const ordered = inOrder(losses, hours);
  const n = ordered.length;
  const most = new Float64Array(n + 1);
  const commences: boolean[] = [];
  for (let at = n - 1; at >= 0; at -= 1) {
    const { amount, next } = periodFrom(ordered, at, hours);
    const taken = worth(amount) + most[next]!;
    commences[at] = taken >= most[at + 1]!;
    most[at] = Math.max(taken, most[at + 1]!);
  }
  const periods: LossPeriod[] = [];
  for (let at = 0; at < n;) {
    const { start, amount, next } = periodFrom(ordered, at, hours);
    if (commences[at] === true) periods.push({ start, amount });
    at = commences[at] === true ? next : at + 1;
  }
  return periods;
}
