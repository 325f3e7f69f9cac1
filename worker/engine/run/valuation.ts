import type { ExplainedYear } from '../explain/explain';
import type { House } from '../house/house';
import type { LayerStates } from '../layers/layer-states';
import { rateOnLine } from '../layers/payoff';
import type { Contributors } from '../measures/contributors';
import type { TailPoint } from '../measures/exceedance';
import { premiumSplit, type PayoffMeasures, type PremiumSplit } from '../measures/layer';
import { deciles, leanLens, type Decile, type LensBin } from '../measures/lens';
import { selfCheck, type ExactMeans, type SelfCheck } from '../measures/self-check';
import type { Estimate } from '../measures/sums';
import type { ProgrammePart } from './programme-task';
import type { Workspace } from './workspace';

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
  /** Share of E[Z] that the price adds in standard deviations of Z: (E[m·Z]/E[m] − E[Z])/sd(Z), for comparison only. */
  readonly impliedDeviationLoad: number | null;
  readonly split: PremiumSplit;
  readonly deciles: readonly Decile[];
  /** The years in the middle of each tenth of the price, leanest first. */
  readonly tellingYears: readonly ExplainedYear[];
  readonly selfCheckErrors: number | null;
}

export interface ProgrammeValuation extends Omit<ProgrammePart, 'walkAway' | 'parts'> {
  /** The house's share at the written lines, Σ line × premium, contract currency. */
  readonly marginalPremium: number;
  readonly walkAwayPremium: Estimate;
  readonly technicalPremium: number;
  readonly occurrence: readonly TailPoint[];
  readonly aggregate: readonly TailPoint[];
}

export interface Valuation {
  readonly states: number;
  readonly layers: readonly LayerValuation[];
  readonly programme: ProgrammeValuation;
  readonly lens: readonly LensBin[];
  readonly house: Pick<House, 'discount' | 'sureValue' | 'risklessRate' | 'largestSharpeRatio' | 'floorShare' | 'effectiveStates' | 'netPremium'> & {
    readonly tailBefore: readonly TailPoint[];
    readonly tailAfter: readonly TailPoint[];
  };
  readonly selfCheck: SelfCheck;
  /** k in every state, and where each layer pays. */
  readonly series: { readonly capital: Float64Array; readonly paying: readonly LayerStates[] };
}

/** What does not depend on the layers. */
export interface Curves {
  readonly occurrence: readonly TailPoint[];
  readonly aggregate: readonly TailPoint[];
  /** Yearly mean loss of the programme, ground-up. */
  readonly groundUp: Estimate;
  readonly tailBefore: readonly TailPoint[];
}

/** What a run's tasks found beside its blocks, house and layers. */
export interface Findings extends Curves {
  readonly programme: ProgrammePart;
  readonly tailAfter: readonly TailPoint[];
  readonly means: readonly ExactMeans[];
}

/** Puts a run's valuation together from what its tasks found. */
export function valuationOf(workspace: Workspace, found: Findings): Valuation {
  const { prepared, house, leanBins: bins, layers: parts } = workspace;
  const { basis, grid, programme: terms } = prepared.inputs;
  const { states } = grid;
  const check = selfCheck(prepared, found.means, found.groundUp, parts.map(({ paying }) => ({ sum: paying.countedSum, squares: paying.countedSquares })));
  const layers = terms.layers.map((layer, l): LayerValuation => {
    const part = parts[l];
    if (part === undefined) throw new Error(`layer ${layer.key} was not valued`);
    const { measures, marginal, walkAway } = part;
    const split = premiumSplit(marginal, walkAway.value, layer.limit, basis);
    const technical = split.technicalPremium;
    const loss = measures.expectedLoss.value;
    return {
      key: layer.key,
      ...measures,
      ...part.contributors,
      marginalPremium: marginal.premium,
      walkAwayPremium: walkAway,
      programmeWalkAwayPart: found.programme.parts[l] ?? 0,
      technicalPremium: technical,
      technicalRateOnLine: rateOnLine(technical, layer.limit),
      multiple: loss > 0 ? (technical * (1 + measures.expectedReinstatement.value)) / loss : null,
      impliedDeviationLoad: measures.standardDeviation > 0 ? marginal.leanLoad / house.sureValue / measures.standardDeviation : null,
      split,
      deciles: deciles(bins, part.deciles),
      tellingYears: part.tellingYears,
      selfCheckErrors: check.layers[l] ?? null,
    };
  });
  const minimum = terms.layers.reduce((sum, layer) => sum + layer.line * basis.minimumRateOnLine * layer.limit, 0);
  const { discount, sureValue, risklessRate, largestSharpeRatio, floorShare, effectiveStates, netPremium } = house;
  const { walkAway, parts: _shares, ...programme } = found.programme;
  return {
    states,
    layers,
    programme: {
      ...programme,
      marginalPremium: terms.layers.reduce((sum, layer, l) => sum + layer.line * (layers[l]?.marginalPremium.value ?? 0), 0),
      walkAwayPremium: walkAway,
      technicalPremium: Math.max(walkAway.value * (1 + basis.targetMargin), minimum),
      occurrence: found.occurrence,
      aggregate: found.aggregate,
    },
    lens: leanLens(states, sureValue, bins, terms.layers.map(({ limit }, l) => ({ limit, sums: parts[l]?.lens ?? { payoff: new Float64Array(0), priced: new Float64Array(0) } }))),
    house: { discount, sureValue, risklessRate, largestSharpeRatio, floorShare, effectiveStates, netPremium, tailBefore: found.tailBefore, tailAfter: found.tailAfter },
    selfCheck: check,
    series: { capital: house.capital, paying: parts.map(({ paying }) => paying) },
  };
}

/** Z of a layer in every state, paying or not. */
export function payoffInEveryState({ state, payoff }: Pick<LayerStates, 'state' | 'payoff'>, states: number): Float64Array {
  const dense = new Float64Array(states);
  for (let i = 0; i < state.length; i += 1) dense[state[i] ?? 0] = payoff[i] ?? 0;
  return dense;
}
