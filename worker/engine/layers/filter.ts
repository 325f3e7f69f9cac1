import type { LayerTerms } from '../model/layer';
import type { Prepared } from '../model/prepare';

/** 1 for each event, counted through all catalogues, that a layer covers; null where it covers all. */
export function allowedEvents(prepared: Pick<Prepared, 'catalogues' | 'events'>, layer: LayerTerms): Uint8Array | null {
  const { perils, regions } = layer;
  if (perils === undefined && regions === undefined) return null;
  const allowed = new Uint8Array(prepared.events);
  for (const { catalogue, firstEvent } of prepared.catalogues) {
    const inPeril = catalogue.perils.map((peril) => perils === undefined || perils.includes(peril));
    const inRegion = catalogue.regions.map((region) => regions === undefined || regions.includes(region));
    for (let i = 0; i < catalogue.eventNames.length; i += 1) {
      if (inPeril[catalogue.perilIndex[i] ?? 0] === true && inRegion[catalogue.regionIndex[i] ?? 0] === true) allowed[firstEvent + i] = 1;
    }
  }
  return allowed;
}
