import { reinstatementShare, yearlyPayoff, type AnnualTerms } from '../layers/payoff';
import { demand } from '../model/refusal';

/**
 * Pure premium of a layer with paid reinstatements, from the law of its yearly summed recoveries: the premium that with the
 * reinstatement premiums it brings pays the expected loss, P = E[Z]/(1 + E[ρ]), without discount, load or expense.
 * Source: B. Sundt (1991), On excess of loss reinsurance with reinstatements, Bulletin of the Swiss Association of
 * Actuaries (formula from memory).
 * @param probabilities of each yearly sum, 0 or more, adding up to 1
 * @param summedRecoveries ΣY of each, before annual terms, 0 or more, currency of the terms
 * @returns premium for 100%, same currency
 * @throws EngineInputError for lists that do not match or probabilities that are none
 */
export function purePremium(
  probabilities: readonly number[],
  summedRecoveries: readonly number[],
  terms: AnnualTerms,
): number {
  const states = probabilities.length;
  demand(
    summedRecoveries.length === states,
    'The number of yearly sums',
    summedRecoveries.length,
    `that of probabilities, ${states}`,
  );
  probabilities.forEach((p, i) => demand(p >= 0, `Probability ${i + 1}`, p, '0 or more'));
  const total = probabilities.reduce((sum, p) => sum + p, 0);
  demand(Math.abs(total - 1) < 1e-9, 'The sum of the probabilities', total, '1');
  let expectedPayoff = 0;
  let expectedShare = 0;
  summedRecoveries.forEach((sum, i) => {
    const payoff = yearlyPayoff(sum, terms);
    expectedPayoff += probabilities[i]! * payoff;
    expectedShare += probabilities[i]! * reinstatementShare(payoff, terms);
  });
  return expectedPayoff / (1 + expectedShare);
}
