import type { House } from '../house/house';
import type { BlockResult } from '../model/blocks';
import { BLOCK_STATES } from '../model/inputs';
import type { Prepared } from '../model/prepare';

export interface Contributors {
  readonly topEvents: readonly { readonly event: string; readonly peril: string; readonly region: string; readonly priceShare: number }[];
  readonly perils: readonly { readonly name: string; readonly priceShare: number }[];
  readonly regions: readonly { readonly name: string; readonly priceShare: number }[];
}

const SHOWN_EVENTS = 10;

/** Each event's part of E[m·Z]: a state's payoff is shared among its occurrences in proportion to their recoveries. */
function priceByEvent(prepared: Prepared, blocks: readonly BlockResult[], house: House, payoff: Float64Array, layer: number): Float64Array {
  const last = prepared.catalogues[prepared.catalogues.length - 1];
  const parts = new Float64Array((last?.firstEvent ?? 0) + (last?.catalogue.eventNames.length ?? 0));
  for (const block of blocks) {
    const hits = block.hits[layer];
    if (hits === undefined) continue;
    const offset = block.index * BLOCK_STATES;
    const count = hits.state.length;
    for (let from = 0; from < count; ) {
      const state = hits.state[from] ?? 0;
      let to = from;
      let sum = 0;
      while (to < count && hits.state[to] === state) {
        sum += hits.recovery[to] ?? 0;
        to += 1;
      }
      const value = ((payoff[offset + state] ?? 0) * (house.hunger[offset + state] ?? 0)) / sum;
      for (let i = from; i < to; i += 1) {
        const event = hits.event[i] ?? 0;
        parts[event] = (parts[event] ?? 0) + value * (hits.recovery[i] ?? 0);
      }
      from = to;
    }
  }
  return parts;
}

function shares(sums: ReadonlyMap<string, number>, total: number): { name: string; priceShare: number }[] {
  return [...sums]
    .filter(([, sum]) => sum > 0)
    .map(([name, sum]) => ({ name, priceShare: sum / total }))
    .sort((a, b) => b.priceShare - a.priceShare || (a.name < b.name ? -1 : 1));
}

/** The events, perils and regions that make a layer's price. */
export function contributors(prepared: Prepared, blocks: readonly BlockResult[], house: House, payoff: Float64Array, layer: number): Contributors {
  const parts = priceByEvent(prepared, blocks, house, payoff, layer);
  let total = 0;
  for (const part of parts) total += part;
  const perils = new Map<string, number>();
  const regions = new Map<string, number>();
  const events: { event: string; peril: string; region: string; priceShare: number }[] = [];
  for (const { catalogue, firstEvent } of prepared.catalogues) {
    catalogue.eventNames.forEach((event, i) => {
      const part = parts[firstEvent + i] ?? 0;
      if (part === 0) return;
      const peril = catalogue.perils[catalogue.perilIndex[i] ?? 0] ?? '';
      const region = catalogue.regions[catalogue.regionIndex[i] ?? 0] ?? '';
      perils.set(peril, (perils.get(peril) ?? 0) + part);
      regions.set(region, (regions.get(region) ?? 0) + part);
      events.push({ event, peril, region, priceShare: part / total });
    });
  }
  events.sort((a, b) => b.priceShare - a.priceShare || (a.event < b.event ? -1 : 1));
  return { topEvents: events.slice(0, SHOWN_EVENTS), perils: shares(perils, total), regions: shares(regions, total) };
}
