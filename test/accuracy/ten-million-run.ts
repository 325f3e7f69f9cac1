import type { ValuationInputs } from '../../worker/engine';
import {
  INVENTED_BASIS,
  inventedCatalogue,
  inventedLayer,
  inventedTable,
} from '../../worker/engine/testing/invented';

/** As many as the engine takes: 611 blocks, the last of them not whole. */
export const STATES = 10_000_000;

/** One occurrence a year of two hundred events; two adjoining layers, and a house whose book suffers from the same events. */
export function tenMillionRun(): ValuationInputs {
  const catalogue = inventedCatalogue(200, 1);
  return {
    grid: { seed: '5eed0123456789ab', states: STATES },
    catalogues: [catalogue],
    programme: {
      tables: [inventedTable(catalogue, 'programme', 80, 1, 7)],
      layers: [
        inventedLayer('lower', 4, 2, { reinstatements: [1], line: 0.2 }),
        inventedLayer('upper', 20, 6, { reinstatements: [1, 0.5], line: 0.3 }),
      ],
      inceptionDay: 1,
      toHouseCurrency: 1,
    },
    book: [
      {
        tables: [inventedTable(catalogue, 'book', 600, 1, 8)],
        layers: [20, 45, 100, 220].map((a) => ({
          ...inventedLayer(`xs${a}`, a * 1.25, a, { line: 0.5 }),
          premium: a * 0.05,
        })),
        toHouseCurrency: 1,
      },
    ],
    basis: { ...INVENTED_BASIS, capital: 560, floor: 0.6, attritionalAndOutward: 4 },
  };
}
