import type { LayerTerms, ValuationInputs } from '../../worker/engine';
import { inventedCatalogue, inventedInputs, inventedLayer, inventedTable } from '../../worker/engine/testing/invented';

const LAYERS: readonly LayerTerms[] = [
  inventedLayer('working', 2, 1, { reinstatements: [1, 0.5] }),
  inventedLayer('deductible', 4, 3, { annualDeductible: 1, annualLimit: 6 }),
  inventedLayer('timed', 6, 7, { reinstatedProRataTime: true }),
  inventedLayer('free', 10, 13, { reinstatements: [], unlimitedReinstatementsAt: 0 }),
  inventedLayer('remote', 30, 23, { reinstatements: [], brokerageOnReinstatements: true }),
  inventedLayer('aggregate', 8, 6, { reinstatements: [], form: { kind: 'aggregate', threshold: 0.5, counts: 'over it', cap: 9 } }),
  inventedLayer('franchise', 8, 6, { reinstatements: [], form: { kind: 'aggregate', threshold: 1, counts: 'in full', cap: null } }),
  inventedLayer('second', 5, 1, { form: { kind: 'nth event', first: 2, qualifying: 0.8 } }),
  inventedLayer('north', 5, 2, { regions: ['north'], perils: ['wind'], coParticipation: 0.2 }),
  inventedLayer('inured', 5, 2, { quotaShareKept: 0.7, inuringCovers: [{ limit: 3, attachment: 2, annualLimit: 4 }] }),
];

/** A run of four blocks with every form of layer, two catalogues, a group of events that vary together, and a book. */
export function sharedRun(): ValuationInputs {
  const invented = inventedInputs({ events: 1500, states: 60_000, contracts: 3, layers: 1 });
  const [first] = invented.catalogues;
  if (first === undefined) throw new Error('the invented inputs have a catalogue');
  const quake = { ...inventedCatalogue(400, 0.7, 'invented-quake'), groups: [{ name: 'swarm', varianceToMean: 1.9 }], groupIndex: new Int32Array(400).fill(0) };
  return {
    ...invented,
    catalogues: [first, quake],
    programme: { ...invented.programme, layers: LAYERS, inceptionDay: 182, tables: [...invented.programme.tables, inventedTable(quake, 'quake losses', 90, 0.6, 21)] },
    basis: { ...invented.basis, capital: 60, attritionalAndOutward: 0 },
  };
}
