import type { Prepared } from '../model/prepare';

export interface Contributors {
  readonly topEvents: readonly { readonly event: string; readonly peril: string; readonly region: string; readonly priceShare: number }[];
  readonly perils: readonly { readonly name: string; readonly priceShare: number }[];
  readonly regions: readonly { readonly name: string; readonly priceShare: number }[];
}

const SHOWN_EVENTS = 10;

function shares(sums: ReadonlyMap<string, number>, total: number): { name: string; priceShare: number }[] {
  return [...sums]
    .map(([name, sum]) => ({ name, priceShare: sum / total }))
    .sort((a, b) => b.priceShare - a.priceShare || (a.name < b.name ? -1 : 1));
}

/**
 * The events, perils and regions that make a layer's price.
 * @param parts of E[m·Z] by event, counted through all catalogues
 */
export function contributors(prepared: Pick<Prepared, 'catalogues'>, parts: Float64Array): Contributors {
  let total = 0;
  for (const part of parts) total += part;
  const perils = new Map<string, number>();
  const regions = new Map<string, number>();
  const top: { event: string; peril: string; region: string; priceShare: number }[] = [];
  const before = (a: (typeof top)[number], b: (typeof top)[number]): number => b.priceShare - a.priceShare || (a.event < b.event ? -1 : 1);
  for (const { catalogue, firstEvent } of prepared.catalogues) {
    for (let i = 0; i < catalogue.eventNames.length; i += 1) {
      const part = parts[firstEvent + i] ?? 0;
      if (part === 0) continue;
      const peril = catalogue.perils[catalogue.perilIndex[i] ?? 0] ?? '';
      const region = catalogue.regions[catalogue.regionIndex[i] ?? 0] ?? '';
      perils.set(peril, (perils.get(peril) ?? 0) + part);
      regions.set(region, (regions.get(region) ?? 0) + part);
      const priceShare = part / total;
      if (top.length === SHOWN_EVENTS && priceShare < (top[SHOWN_EVENTS - 1]?.priceShare ?? 0)) continue;
      top.push({ event: catalogue.eventNames[i] ?? '', peril, region, priceShare });
      top.sort(before);
      top.length = Math.min(top.length, SHOWN_EVENTS);
    }
  }
  return { topEvents: top, perils: shares(perils, total), regions: shares(regions, total) };
}
