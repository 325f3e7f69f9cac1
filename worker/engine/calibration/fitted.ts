import { exp } from '../math/exp';
import { ln } from '../math/ln';
import { demand } from '../model/refusal';

/** A past deal of the house: what it pays in each state and what was paid for it, for 100%, contract currency. */
export interface PastDeal {
  readonly name: string;
  /** Z in each state. */
  readonly payoff: Float64Array;
  /** ρ in each state: reinstatement premium as a share of the premium. */
  readonly reinstatement: Float64Array;
  /** q, q_R and a, as for a premium that is to be found. */
  readonly deductions: number;
  readonly reinstatementDeductions: number;
  readonly lossAdjustment: number;
  /** F/w, the contract's fixed expense for 100%. */
  readonly fixedExpense: number;
  readonly observedPremium: number;
  /** How much it counts, above 0; 1 where left out. */
  readonly weight?: number;
}

/** The house on whose capital the deals are weighed. */
export interface CalibratedHouse {
  /** k in each state. */
  readonly capital: Float64Array;
  readonly floor: number;
  /** Anchors m at every risk aversion: E[m] = 1/(1 + risklessRate). */
  readonly risklessRate: number;
}

interface Paying {
  readonly deal: PastDeal;
  readonly state: Uint32Array;
}

/** @throws EngineInputError outside the domain of a deal */
function checkDeal(deal: PastDeal, states: number): void {
  const name = `Deal ${deal.name}`;
  demand(deal.payoff.length === states, `${name}: the number of states of its payoff`, deal.payoff.length, `that of the house, ${states}`);
  demand(deal.reinstatement.length === states, `${name}: the number of states of its reinstatement premium`, deal.reinstatement.length, `that of the house, ${states}`);
  demand(deal.observedPremium > 0 && deal.observedPremium < Infinity, `${name}: the premium observed`, deal.observedPremium, 'above 0');
  demand(deal.deductions >= 0 && deal.deductions < 1, `${name}: deductions`, deal.deductions, '0 or more and below 1');
  demand(deal.reinstatementDeductions >= 0 && deal.reinstatementDeductions <= 1, `${name}: deductions from reinstatement premiums`, deal.reinstatementDeductions, 'from 0 to 1');
  demand(deal.lossAdjustment >= 0 && deal.lossAdjustment < Infinity, `${name}: loss adjustment expense`, deal.lossAdjustment, '0 or more');
  demand(deal.fixedExpense >= 0 && deal.fixedExpense < Infinity, `${name}: fixed expense`, deal.fixedExpense, '0 or more');
  demand((deal.weight ?? 1) > 0 && (deal.weight ?? 1) < Infinity, `${name}: the weight`, deal.weight ?? 1, 'above 0');
  for (const z of deal.payoff) if (!(z >= 0 && z < Infinity)) demand(false, `${name}: a payoff`, z, '0 or more');
  for (const rho of deal.reinstatement) if (!(rho >= 0 && rho < Infinity)) demand(false, `${name}: a reinstatement premium`, rho, '0 or more');
}

/**
 * Marginal premiums of past deals as functions of the risk aversion γ, m = β·max(k, φ)^(−γ) anchored at the riskless rate:
 * P(γ) = (E[m·Z]·(1 + a) + F/w) / ((1 − q) + (1 − q_R)·E[m·ρ]).
 */
export class FittedPremiums {
  private readonly logCapital: Float64Array;
  private readonly weight: Float64Array;
  private readonly deals: readonly Paying[];
  evaluations = 0;
  /** β of the last risk aversion asked for. */
  discount = Number.NaN;

  constructor(
    deals: readonly PastDeal[],
    private readonly house: CalibratedHouse,
  ) {
    const states = house.capital.length;
    demand(states > 0, 'The number of states', states, 'above 0');
    demand(house.floor > 0 && house.floor <= 1, 'The floor', house.floor, 'above 0 and 1 at most');
    demand(house.risklessRate > -1 && house.risklessRate < Infinity, 'The riskless rate', house.risklessRate, 'above −1');
    demand(deals.length > 0, 'The number of deals', deals.length, 'above 0');
    deals.forEach((deal) => checkDeal(deal, states));
    this.logCapital = house.capital.map((k) => {
      if (!(k > -Infinity && k < Infinity)) demand(false, 'A capital share', k, 'finite');
      return ln(k > house.floor ? k : house.floor);
    });
    this.weight = new Float64Array(states);
    this.deals = deals.map((deal) => ({ deal, state: Uint32Array.from(placesPaid(deal)) }));
  }

  /** Whether any deal pays in any state. */
  get pays(): boolean {
    return this.deals.some(({ state }) => state.length > 0);
  }

  at(riskAversion: number): number[] {
    this.evaluations += 1;
    const { weight, logCapital } = this;
    const states = weight.length;
    let total = 0;
    for (let s = 0; s < states; s += 1) {
      const w = exp(-riskAversion * (logCapital[s] ?? 0));
      weight[s] = w;
      total += w;
    }
    this.discount = states / (total * (1 + this.house.risklessRate));
    return this.deals.map(({ deal, state }) => {
      let [paid, reinstated] = [0, 0];
      for (const s of state) {
        const w = weight[s] ?? 0;
        paid += w * (deal.payoff[s] ?? 0);
        reinstated += w * (deal.reinstatement[s] ?? 0);
      }
      const mean = this.discount / states;
      const cost = paid * mean * (1 + deal.lossAdjustment) + deal.fixedExpense;
      return cost / (1 - deal.deductions + (1 - deal.reinstatementDeductions) * reinstated * mean);
    });
  }
}

function placesPaid({ payoff, reinstatement }: PastDeal): number[] {
  const places: number[] = [];
  payoff.forEach((z, s) => {
    if (z > 0 || (reinstatement[s] ?? 0) > 0) places.push(s);
  });
  return places;
}
