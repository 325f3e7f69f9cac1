import type { House } from '../house/house';
import { yearlyCover } from '../layers/payoff';
import type { HouseBasis } from '../model/inputs';
import type { Deal } from '../premiums/deal';
import type { MarginalPremium } from '../premiums/marginal';
import { moments, sumStates, type Estimate } from './sums';

/** Fewer effective states than this and the price is called thin. */
const THIN_STATES = 2500;

export interface PremiumSplit {
  readonly risklessLoss: number;
  readonly leanLoad: number;
  readonly lossAdjustment: number;
  readonly fixedExpense: number;
  readonly brokerageAndExpense: number;
  readonly reinstatementValue: number;
  readonly marginalPremium: number;
  readonly lineSizeLoad: number;
  readonly walkAwayPremium: number;
  readonly margin: number;
  readonly minimumTopUp: number;
  readonly technicalPremium: number;
}

/** Technical premium = max(walk-away × (1 + margin), minimum rate on line × limit), with every step from the expected loss. */
export function premiumSplit(marginal: MarginalPremium, walkAway: number, limit: number, basis: HouseBasis): PremiumSplit {
  const loaded = walkAway * (1 + basis.targetMargin);
  const technicalPremium = Math.max(loaded, basis.minimumRateOnLine * limit);
  return {
    risklessLoss: marginal.risklessLoss,
    leanLoad: marginal.leanLoad,
    lossAdjustment: marginal.lossAdjustment,
    fixedExpense: marginal.fixedExpense,
    brokerageAndExpense: marginal.brokerageAndExpense,
    reinstatementValue: marginal.reinstatementValue,
    marginalPremium: marginal.premium.value,
    lineSizeLoad: walkAway - marginal.premium.value,
    walkAwayPremium: walkAway,
    margin: loaded - walkAway,
    minimumTopUp: technicalPremium - loaded,
    technicalPremium,
  };
}

export interface PayoffMeasures {
  readonly expectedLoss: Estimate;
  readonly standardDeviation: number;
  readonly attachmentProbability: Estimate;
  readonly exhaustionProbability: Estimate;
  readonly pricedAttachmentProbability: number;
  readonly expectedReinstatement: number;
  readonly effectiveStates: number;
  readonly thin: boolean;
}

/** What a layer's payoff looks like over the states, and how many of them carry its price: 1/Σw², w their shares of E[m·Z]. */
export function payoffMeasures(deal: Deal, house: House): PayoffMeasures {
  const { payoff, reinstatement, layer } = deal;
  const { states, hunger } = house;
  const loss = moments(states, (s) => payoff[s] ?? 0);
  const cover = yearlyCover(layer);
  const probability = (happens: (z: number) => boolean): Estimate => {
    const value = sumStates(states, (s) => (happens(payoff[s] ?? 0) ? 1 : 0)) / states;
    return { value, standardError: Math.sqrt((value * (1 - value)) / states) };
  };
  const total = sumStates(states, (s) => (hunger[s] ?? 0) * (payoff[s] ?? 0));
  const squares = sumStates(states, (s) => {
    const weighted = (hunger[s] ?? 0) * (payoff[s] ?? 0);
    return weighted * weighted;
  });
  const effectiveStates = squares === 0 ? 0 : (total * total) / squares;
  return {
    expectedLoss: { value: loss.value, standardError: loss.standardError },
    standardDeviation: loss.deviation,
    attachmentProbability: probability((z) => z > 0),
    exhaustionProbability: probability((z) => z >= cover),
    pricedAttachmentProbability: sumStates(states, (s) => ((payoff[s] ?? 0) > 0 ? (hunger[s] ?? 0) : 0)) / states / house.sureValue,
    expectedReinstatement: sumStates(states, (s) => reinstatement[s] ?? 0) / states,
    effectiveStates,
    thin: effectiveStates < THIN_STATES,
  };
}
