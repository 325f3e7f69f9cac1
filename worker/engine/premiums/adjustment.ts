import { demand } from '../model/refusal';

/** How a layer's premium is agreed before the subject premium is known; amounts in one currency, for 100%. */
export interface AdjustableTerms {
  /** Never less than this is paid. */
  readonly minimumPremium: number;
  /** Paid at inception, in one or more instalments. */
  readonly depositPremium: number;
  /** Share of the subject premium, a fraction of 1. */
  readonly rate: number;
}

/** The premium account of a layer once the subject premium is known; same currency. */
export interface PremiumAdjustment {
  /** rate × subject premium, the minimum at least. */
  readonly adjustedPremium: number;
  /** Adjusted less deposit premium: due to the reinsurer, or back to the cedant where below 0. */
  readonly premiumDue: number;
  /** As charged on the deposit premium when the loss was paid. */
  readonly depositReinstatementPremium: number;
  /** On the adjusted premium. */
  readonly finalReinstatementPremium: number;
  /** Final less what was charged on the deposit premium. */
  readonly reinstatementDue: number;
  /** Both together. */
  readonly totalDue: number;
}

/**
 * Adjusts a minimum and deposit premium, and with it the reinstatement premium that was charged on the deposit.
 * @param subjectPremium premium income of the business covered, 0 or more, same currency as the terms
 * @param reinstatementShare reinstatement premium as a share of the layer premium, as `reinstatementShare` gives it
 * @throws EngineInputError for an amount, rate or share that is not 0 or more
 * Source: Chartered Insurance Institute, M97 Reinsurance (2018/19), chapter 5.
 */
export function adjustPremium(
  terms: AdjustableTerms,
  subjectPremium: number,
  reinstatementShare: number,
): PremiumAdjustment {
  const { minimumPremium, depositPremium, rate } = terms;
  const given = {
    'The minimum premium': minimumPremium,
    'The deposit premium': depositPremium,
    'The rate on subject premium': rate,
    'The subject premium': subjectPremium,
    'The reinstatement share': reinstatementShare,
  };
  for (const [name, value] of Object.entries(given)) {
    demand(value >= 0 && value < Infinity, name, value, '0 or more');
  }
  const adjustedPremium = Math.max(rate * subjectPremium, minimumPremium);
  const premiumDue = adjustedPremium - depositPremium;
  const depositReinstatementPremium = depositPremium * reinstatementShare;
  const finalReinstatementPremium = adjustedPremium * reinstatementShare;
  const reinstatementDue = finalReinstatementPremium - depositReinstatementPremium;
  return {
    adjustedPremium,
    premiumDue,
    depositReinstatementPremium,
    finalReinstatementPremium,
    reinstatementDue,
    totalDue: premiumDue + reinstatementDue,
  };
}
