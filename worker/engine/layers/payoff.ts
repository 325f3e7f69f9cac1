/** min(max(loss − attachment, 0), limit): what one occurrence recovers from a layer, for 100%. */
export function occurrenceRecovery(loss: number, limit: number, attachment: number): number {
  return loss <= attachment ? 0 : Math.min(loss - attachment, limit);
}

/** The annual terms of a layer that act on its summed occurrence recoveries. */
export interface AnnualTerms {
  readonly limit: number;
  readonly annualDeductible: number;
  readonly reinstatements: readonly number[];
  readonly unlimitedReinstatementsAt?: number;
  readonly annualLimit?: number;
}

/**
 * Most that a layer pays in a year: its limit once and once again for each reinstatement, or the annual limit if less;
 * Infinity where reinstatements are unlimited and nothing else bounds them.
 */
export function yearlyCover(terms: AnnualTerms): number {
  const cover = terms.unlimitedReinstatementsAt === undefined ? (terms.reinstatements.length + 1) * terms.limit : Infinity;
  return Math.min(cover, terms.annualLimit ?? Infinity);
}

/** Z = min(max(ΣY − D, 0), cover): the year's payoff from the summed recoveries. */
export function yearlyPayoff(summedRecoveries: number, terms: AnnualTerms): number {
  return Math.min(Math.max(summedRecoveries - terms.annualDeductible, 0), yearlyCover(terms));
}

/**
 * Reinstatement premium as a fraction of the layer premium: Σ price × amount reinstated ÷ limit, pro rata as to amount and
 * 100% as to time. Cover is consumed in order; tranche k reinstates the k-th limit; the last limit is not reinstated.
 */
export function reinstatementShare(payoff: number, terms: AnnualTerms): number {
  if (terms.unlimitedReinstatementsAt !== undefined) return (terms.unlimitedReinstatementsAt * payoff) / terms.limit;
  let share = 0;
  for (let k = 0; k < terms.reinstatements.length; k += 1) {
    const reinstated = Math.min(Math.max(payoff - k * terms.limit, 0), terms.limit);
    if (reinstated === 0) break;
    share += ((terms.reinstatements[k] ?? 0) * reinstated) / terms.limit;
  }
  return share;
}

/** Recoveries of a year's losses in their order, as the cover is used up: one entry a loss. */
export function recoveriesInOrder(losses: readonly number[], attachment: number, terms: AnnualTerms): number[] {
  let summed = 0;
  let paid = 0;
  return losses.map((loss) => {
    summed += occurrenceRecovery(loss, terms.limit, attachment);
    const now = yearlyPayoff(summed, terms);
    const recovered = now - paid;
    paid = now;
    return recovered;
  });
}

/** Premium ÷ limit. */
export function rateOnLine(premium: number, limit: number): number {
  return premium / limit;
}

/** Years of premium that pay for one limit. */
export function paybackYears(premium: number, limit: number): number {
  return limit / premium;
}
