import type { House } from '../house/house';
import { allowedEvents } from '../layers/filter';
import { LayerYear } from '../layers/layer-year';
import type { BlockResult } from '../model/blocks';
import { BLOCK_STATES } from '../model/inputs';
import type { Prepared } from '../model/prepare';
import { demand } from '../model/refusal';

/** One occurrence on its way through a layer; amounts for 100%, contract currency. */
export interface ExplainedOccurrence {
  readonly event: string;
  readonly peril: string;
  readonly region: string;
  /** Days since inception. */
  readonly day: number;
  /** Ground-up. */
  readonly loss: number;
  /** After inuring quota share and excess covers. */
  readonly net: number;
  /** What it counts for before annual terms. */
  readonly counted: number;
  /** What the layer pays for it, as its cover is used up in order. */
  readonly paid: number;
  /** What it adds to the reinstatement premium, as a share of the layer premium. */
  readonly reinstatement: number;
}

/** Why a layer's price is what it is, in one simulated year. */
export interface ExplainedYear {
  /** Number of the state in the grid, from 0. */
  readonly state: number;
  readonly occurrences: readonly ExplainedOccurrence[];
  /** ΣY before annual terms, Z and ρ. */
  readonly counted: number;
  readonly payoff: number;
  readonly reinstatement: number;
  /** The book's catastrophe loss net of reinstatement premiums, house currency. */
  readonly bookLoss: number;
  /** k: capital at the year's end as a share of opening capital, without the programme. */
  readonly capital: number;
  /** m: today's value of one unit paid in this year. */
  readonly hunger: number;
  /** m·Z/S: what the year adds to E[m·Z]. */
  readonly contribution: number;
}

/** What explaining needs of a run: its blocks, the house, and the book's loss in every state. */
export interface Explicable {
  readonly prepared: Prepared;
  readonly blocks: readonly BlockResult[];
  readonly house: Pick<House, 'capital' | 'slope' | 'discount' | 'states'>;
  readonly bookLoss: Float64Array;
}

/** Where an event stands in its catalogue. */
function eventAt(prepared: Prepared, number: number): { event: string; peril: string; region: string } {
  for (const { catalogue, firstEvent } of prepared.catalogues) {
    const i = number - firstEvent;
    const event = i >= 0 ? catalogue.eventNames[i] : undefined;
    if (event === undefined) continue;
    return { event, peril: catalogue.perils[catalogue.perilIndex[i] ?? 0] ?? '', region: catalogue.regions[catalogue.regionIndex[i] ?? 0] ?? '' };
  }
  return { event: '', peril: '', region: '' };
}

/**
 * The chain from a state's occurrences to what it adds to a layer's price, by the very functions that price: occurrences,
 * losses, recoveries, reinstatement premium, capital, hunger, contribution. Summed over all states, contributions are E[m·Z].
 * @param layer place of the layer in the programme
 * @param state number of the state, from 0
 * @throws EngineInputError for a layer or a state that the run does not have
 */
export function explainYear({ prepared, blocks, house, bookLoss }: Explicable, layer: number, state: number): ExplainedYear {
  const terms = prepared.programme.layers[layer];
  demand(terms !== undefined, 'The number of the layer', layer, `from 0 to ${prepared.programme.layers.length - 1}`);
  demand(Math.floor(state) === state && state >= 0 && state < house.states, 'The number of the state', state, `a whole number from 0 to ${house.states - 1}`);
  const index = Math.floor(state / BLOCK_STATES);
  const losses = blocks[index]?.losses;
  const year = new LayerYear(terms);
  const allowed = allowedEvents(prepared, terms);
  const occurrences: ExplainedOccurrence[] = [];
  year.begin();
  for (let i = 0; i < (losses?.count ?? 0); i += 1) {
    if (losses?.state[i] !== state - index * BLOCK_STATES) continue;
    const [loss, day] = [losses.loss[i] ?? 0, losses.day[i] ?? 0];
    // Those that no layer of the programme counts are left out.
    if (loss < prepared.programme.reach) continue;
    const event = losses.event[i] ?? 0;
    const takes = loss >= year.reach && (allowed === null || allowed[event] === 1);
    const [paid, reinstated] = [year.payoff, year.reinstatement];
    const counted = takes ? year.take(loss, day) : 0;
    occurrences.push({
      ...eventAt(prepared, event),
      day,
      loss,
      net: takes ? year.net : 0,
      counted,
      paid: year.payoff - paid,
      reinstatement: year.reinstatement - reinstated,
    });
  }
  const hunger = house.discount * (house.slope[state] ?? 0);
  const { payoff } = year;
  return {
    state,
    occurrences,
    counted: year.summed,
    payoff,
    reinstatement: year.reinstatement,
    bookLoss: bookLoss[state] ?? 0,
    capital: house.capital[state] ?? 0,
    hunger,
    contribution: (hunger * payoff) / house.states,
  };
}
