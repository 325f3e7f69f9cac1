import { openWorkspace, type Catalogue, type LossTable, type ValuationInputs } from '..';
import { blockIn } from '../model/blocks';
import { perform } from '../run/tasks';
import { inventedInputs, inventedLayer } from '../testing/invented';

const EVENTS = 60;

/** Events that all fall on one day of the year, often several in a state; the files the right way round or turned. */
function inputs(turned: boolean): ValuationInputs {
  const invented = inventedInputs({ events: EVENTS, states: 2000, contracts: 1, layers: 1 });
  const [catalogue] = invented.catalogues;
  const [table] = invented.programme.tables;
  if (catalogue === undefined || table === undefined) throw new Error('the invented inputs have a catalogue and a table');
  const onOneDay: Catalogue = { ...catalogue, seasonDay: new Float64Array(EVENTS).fill(200), ratePerYear: new Float64Array(EVENTS).fill(0.1) };
  const reversed: Catalogue = {
    ...onOneDay,
    eventNames: [...onOneDay.eventNames].reverse(),
    perilIndex: onOneDay.perilIndex.slice().reverse(),
    regionIndex: onOneDay.regionIndex.slice().reverse(),
  };
  const tableOfReversed: LossTable = { ...table, eventIndex: table.eventIndex.map((event) => EVENTS - 1 - event) };
  return {
    ...invented,
    catalogues: [turned ? reversed : onOneDay],
    programme: { ...invented.programme, tables: [turned ? tableOfReversed : table], layers: [inventedLayer('all', 10, 0)] },
    book: [],
  };
}

/** Each loss that counts as state, event and loss, in the order in which layers take them. */
function losses(of: ValuationInputs): string[] {
  const workspace = openWorkspace(of);
  perform(workspace, { kind: 'laws', from: 0, to: workspace.prepared.rows });
  const found = perform(workspace, { kind: 'block', index: 0 });
  if (found.kind !== 'block') throw new Error('a block was asked for');
  const { losses: kept } = blockIn(found.memory);
  return Array.from(kept.state, (state, i) => `${state} ${of.catalogues[0]?.eventNames[kept.event[i] ?? 0] ?? ''} ${kept.loss[i] ?? 0}`);
}

describe('the losses of a block', () => {
  it('come in an order that does not hang on where events stand in their file, also on one day', () => {
    const upright = losses(inputs(false));
    expect(upright.length).toBeGreaterThan(2000);
    expect(new Set(upright.map((line) => line.split(' ')[0])).size).toBeLessThan(upright.length / 1.5);
    expect(losses(inputs(true))).toEqual(upright);
  });
});
