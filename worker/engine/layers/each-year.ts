import type { BlockLosses } from '../model/blocks';
import type { LayerYear, PlainExcess } from './layer-year';
import { occurrenceRecovery, reinstatementShare, yearlyPayoff, type AnnualTerms } from './payoff';

/** The years of a block in which a layer pays, in order; what was counted in all its years beside. */
export class PaidYears {
  paying = 0;
  /** State within the block, Z, ρ and ΣY of each paying year; the year's losses are those of the block from `from` to `to`. */
  readonly state: Uint16Array;
  readonly payoff: Float64Array;
  readonly reinstatement: Float64Array;
  readonly counted: Float64Array;
  readonly from: Uint32Array;
  readonly to: Uint32Array;
  /** Of ΣY, what occurrences counted for before annual terms: its sum and the sum of its squares over the block's years. */
  countedSum = 0;
  countedSquares = 0;

  /** @param states most that a block has */
  constructor(states: number) {
    this.state = new Uint16Array(states);
    this.payoff = new Float64Array(states);
    this.reinstatement = new Float64Array(states);
    this.counted = new Float64Array(states);
    this.from = new Uint32Array(states);
    this.to = new Uint32Array(states);
  }
}

/**
 * The layer kernel: takes a layer through every year of a block that has an occurrence within its reach.
 * @param out taken over: emptied and filled
 * @param allowed 1 for each event that the layer covers; null: all
 * @param counts written at the place of each loss of those years: what it counted for before annual terms; null: not wanted
 */
export function eachYear(out: PaidYears, year: LayerYear, losses: BlockLosses, allowed: Uint8Array | null, counts: Float64Array | null): void {
  if (year.plain !== null && allowed === null) plainYears(out, year.plain, year.annual, losses, counts);
  else anyYears(out, year, losses, allowed, counts);
}

/** Any layer, occurrence by occurrence through its own year. */
function anyYears(out: PaidYears, year: LayerYear, losses: BlockLosses, allowed: Uint8Array | null, counts: Float64Array | null): void {
  const { count, state: states, event, day, loss } = losses;
  const { reach } = year;
  let paying = 0;
  let sum = 0;
  let squares = 0;
  for (let i = 0; i < count; ) {
    if ((loss[i] ?? 0) < reach) {
      i += 1;
      continue;
    }
    const state = states[i] ?? 0;
    const from = i;
    year.begin();
    for (; i < count && states[i] === state; i += 1) {
      const x = loss[i] ?? 0;
      const takes = x >= reach && (allowed === null || allowed[event[i] ?? 0] === 1);
      const own = takes ? year.take(x, day[i] ?? 0) : 0;
      if (counts !== null) counts[i] = own;
    }
    const counted = year.summed;
    if (counted === 0) continue;
    sum += counted;
    squares += counted * counted;
    const { payoff } = year;
    if (payoff <= 0) continue;
    out.state[paying] = state;
    out.payoff[paying] = payoff;
    out.reinstatement[paying] = year.reinstatement;
    out.counted[paying] = counted;
    out.from[paying] = from;
    out.to[paying] = i;
    paying += 1;
  }
  out.paying = paying;
  out.countedSum = sum;
  out.countedSquares = squares;
}

/**
 * The same for a plain excess of loss, by the same functions without the year's state: an occurrence counts for itself, so
 * that losses within the attachment are passed over wherever they stand.
 */
function plainYears(out: PaidYears, { limit, attachment, quotaShareKept }: PlainExcess, annual: AnnualTerms, losses: BlockLosses, counts: Float64Array | null): void {
  const { count, state: states, loss } = losses;
  counts?.fill(0, 0, count);
  let paying = 0;
  let sum = 0;
  let squares = 0;
  for (let i = 0; i < count; ) {
    let own = occurrenceRecovery((loss[i] ?? 0) * quotaShareKept, limit, attachment);
    if (own === 0) {
      i += 1;
      continue;
    }
    const state = states[i] ?? 0;
    const from = i;
    let counted = 0;
    for (;;) {
      counted += own;
      if (counts !== null) counts[i] = own;
      i += 1;
      if (i === count || states[i] !== state) break;
      own = occurrenceRecovery((loss[i] ?? 0) * quotaShareKept, limit, attachment);
    }
    sum += counted;
    squares += counted * counted;
    const payoff = yearlyPayoff(counted, annual);
    if (payoff <= 0) continue;
    out.state[paying] = state;
    out.payoff[paying] = payoff;
    out.reinstatement[paying] = reinstatementShare(payoff, annual);
    out.counted[paying] = counted;
    out.from[paying] = from;
    out.to[paying] = i;
    paying += 1;
  }
  out.paying = paying;
  out.countedSum = sum;
  out.countedSquares = squares;
}
