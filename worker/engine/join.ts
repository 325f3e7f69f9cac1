import { houseOf, type House } from './house/house';
import { rateOnLine } from './layers/payoff';
import { contributors, type Contributors } from './measures/contributors';
import { RETURN_PERIODS, exceedance, type TailPoint } from './measures/exceedance';
import { payoffMeasures, premiumSplit, type PayoffMeasures, type PremiumSplit } from './measures/layer';
import { leanOrder } from './measures/lean-order';
import { deciles, leanLens, type Decile, type LensBin } from './measures/lens';
import { selfCheck, type SelfCheck } from './measures/self-check';
import { moments, type Estimate } from './measures/sums';
import type { BlockResult } from './model/blocks';
import { EngineInputError } from './model/inputs';
import type { Prepared } from './model/prepare';
import { dealOf, type Deal } from './premiums/deal';
import { marginalPremium } from './premiums/marginal';
import { programmeWalkAway } from './premiums/programme';
import { walkAwayPremium } from './premiums/walk-away';

const HOUSE_TAIL_YEARS = [100, 250] as const;

export interface LayerValuation extends PayoffMeasures, Contributors {
  readonly key: string;
  readonly marginalPremium: Estimate;
  /** Stand-alone, at the written line. */
  readonly walkAwayPremium: Estimate;
  readonly programmeWalkAwayPart: number;
  readonly technicalPremium: number;
  readonly technicalRateOnLine: number;
  /** (premium + expected reinstatement premium) ÷ expected loss, at the technical premium; null without expected loss. */
  readonly multiple: number | null;
  readonly split: PremiumSplit;
  readonly deciles: readonly Decile[];
  readonly selfCheckErrors: number | null;
}

export interface Valuation {
  readonly states: number;
  readonly layers: readonly LayerValuation[];
  readonly programme: {
    readonly expectedLoss: Estimate;
    readonly standardDeviation: number;
    readonly walkAwayPremium: number;
    readonly technicalPremium: number;
    readonly occurrence: readonly TailPoint[];
    readonly aggregate: readonly TailPoint[];
  };
  readonly lens: readonly LensBin[];
  readonly house: Omit<House, 'capital' | 'bookLoss' | 'hunger' | 'states'> & {
    readonly tailBefore: readonly TailPoint[];
    readonly tailAfter: readonly TailPoint[];
  };
  readonly selfCheck: SelfCheck;
  /** k and then Z of each layer, one entry a state. */
  readonly series: { readonly capital: Float64Array; readonly payoffs: readonly Float64Array[] };
}

function joined(blocks: readonly BlockResult[], states: number, of: (block: BlockResult) => Float64Array | undefined): Float64Array {
  const whole = new Float64Array(states);
  let at = 0;
  for (const block of blocks) {
    whole.set(of(block) ?? [], at);
    at += block.states;
  }
  return whole;
}

function checkBlocks(prepared: Prepared, blocks: readonly BlockResult[]): void {
  if (blocks.length !== prepared.blocks || blocks.some((block, index) => block.index !== index)) {
    throw new EngineInputError('The blocks of a run must all be there, in their order.');
  }
}

/** The house's catastrophe loss net of reinstatement premiums, in its tail, with and without the programme at its lines. */
function houseTails(house: House, toHouseCurrency: number, deals: readonly Deal[], premiums: readonly number[]) {
  const after = house.bookLoss.slice();
  deals.forEach((deal, l) => {
    const line = deal.layer.line * toHouseCurrency;
    const reinstating = (1 - deal.reinstatementDeductions) * (premiums[l] ?? 0);
    for (let s = 0; s < after.length; s += 1) {
      const payoff = deal.payoff[s] ?? 0;
      if (payoff > 0) after[s] = (after[s] ?? 0) + line * (payoff * (1 + deal.lossAdjustment) - reinstating * (deal.reinstatement[s] ?? 0));
    }
  });
  return { tailBefore: exceedance(house.bookLoss, HOUSE_TAIL_YEARS), tailAfter: exceedance(after, HOUSE_TAIL_YEARS) };
}

/**
 * Joins the blocks of a run to its valuation: the house in every state, every layer's premiums with their split, the
 * programme as a whole, and the measures. Sums run block by block in order, so the bytes do not depend on who valued what.
 */
export function joinBlocks(prepared: Prepared, blocks: readonly BlockResult[]): Valuation {
  checkBlocks(prepared, blocks);
  const { basis, grid, programme: terms } = prepared.inputs;
  const { states } = grid;
  const house = houseOf(prepared, blocks);
  const preferences = { riskAversion: basis.riskAversion, floor: basis.floor };
  const place = { layers: terms.layers.length, toHouseCurrency: terms.toHouseCurrency };
  const payoffs = terms.layers.map((_layer, l) => joined(blocks, states, (block) => block.payoffs[l]));
  const deals = terms.layers.map((layer, l) => dealOf(layer, payoffs[l] ?? new Float64Array(states), basis, place));
  const marginals = deals.map((deal) => marginalPremium(deal, house));
  const walkAways = deals.map((deal, l) => walkAwayPremium(deal, house, preferences, marginals[l]?.premium.value ?? 0));
  const together = programmeWalkAway(deals, house, preferences, walkAways.map((premium) => premium.value));
  const aggregateLoss = joined(blocks, states, (block) => block.aggregateLoss);
  const check = selfCheck(prepared, blocks, aggregateLoss);
  const order = leanOrder(house.capital);

  const layers = deals.map((deal, l): LayerValuation => {
    const marginal = marginals[l] ?? marginalPremium(deal, house);
    const walkAway = walkAways[l] ?? { value: 0, standardError: 0 };
    const measures = payoffMeasures(deal, house);
    const split = premiumSplit(marginal, walkAway.value, deal.layer.limit, basis);
    const technical = split.technicalPremium;
    const income = technical * (1 + measures.expectedReinstatement);
    return {
      key: deal.layer.key,
      ...measures,
      ...contributors(prepared, blocks, house, deal.payoff, l),
      marginalPremium: marginal.premium,
      walkAwayPremium: walkAway,
      programmeWalkAwayPart: together.layers[l] ?? 0,
      technicalPremium: technical,
      technicalRateOnLine: rateOnLine(technical, deal.layer.limit),
      multiple: measures.expectedLoss.value > 0 ? income / measures.expectedLoss.value : null,
      split,
      deciles: deciles(order, house, deal.payoff),
      selfCheckErrors: check.layers[l] ?? null,
    };
  });
  const total = moments(states, (s) => payoffs.reduce((sum, payoff) => sum + (payoff[s] ?? 0), 0));
  const minimum = terms.layers.reduce((sum, layer) => sum + layer.line * basis.minimumRateOnLine * layer.limit, 0);
  const { sureValue, risklessRate, largestSharpeRatio, floorShare, effectiveStates, netPremium } = house;
  return {
    states,
    layers,
    programme: {
      expectedLoss: { value: total.value, standardError: total.standardError },
      standardDeviation: total.deviation,
      walkAwayPremium: together.total,
      technicalPremium: Math.max(together.total * (1 + basis.targetMargin), minimum),
      occurrence: exceedance(joined(blocks, states, (block) => block.occurrenceLoss), RETURN_PERIODS),
      aggregate: exceedance(aggregateLoss, RETURN_PERIODS),
    },
    lens: leanLens(order, house, deals.map((deal) => ({ payoff: deal.payoff, limit: deal.layer.limit }))),
    house: {
      sureValue,
      risklessRate,
      largestSharpeRatio,
      floorShare,
      effectiveStates,
      netPremium,
      ...houseTails(house, terms.toHouseCurrency, deals, together.layers),
    },
    selfCheck: check,
    series: { capital: house.capital, payoffs },
  };
}
