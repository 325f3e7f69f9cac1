import expm1 from '@stdlib/math-base-special-expm1';
import log1p from '@stdlib/math-base-special-log1p';
import { demand } from '../model/refusal';

function demandYears(years: number): void {
  demand(years > 0 && years < Infinity, 'The span of years', years, 'above 0');
}

/**
 * Chance that what has a yearly probability happens at least once in a span of independent years: 1 − (1 − p)^years.
 * @param yearlyProbability 0 to 1; "1 in N" is 1/N (common practice)
 * @param years above 0
 * @throws EngineInputError out of these bounds
 */
export function chanceWithin(years: number, yearlyProbability: number): number {
  demandYears(years);
  demand(
    yearlyProbability >= 0 && yearlyProbability <= 1,
    'The yearly probability',
    yearlyProbability,
    'from 0 to 1',
  );
  return -expm1(years * log1p(-yearlyProbability));
}

/**
 * N of the "1 in N" years whose yearly probability gives a chance in a span of years; the inverse of `chanceWithin`.
 * @param chance above 0, below 1
 * @throws EngineInputError out of these bounds
 */
export function returnPeriodOf(chance: number, years: number): number {
  demandYears(years);
  demand(chance > 0 && chance < 1, 'The chance', chance, 'above 0 and below 1');
  return -1 / expm1(log1p(-chance) / years);
}
