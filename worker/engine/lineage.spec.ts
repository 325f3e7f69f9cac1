import { drawLosses } from './blocks/contract-losses';
import { BLOCK_STATES, type Catalogue, type LossTable, type ValuationInputs } from './model/inputs';
import { catalogueKeys, drawOccurrences, Occurrences } from './random/occurrences';
import { openWorkspace } from './run/value';
import { perform, WAVES } from './run/tasks';
import { blockIn } from './model/blocks';
import { inventedCatalogue, inventedInputs, inventedLayer, inventedTable } from './testing/invented';

const SEED = '00112233445566ff';
const EVENTS = 20_000;
const CHANGED = 'event 777';
const base = inventedInputs({ events: 10, states: BLOCK_STATES + 1000, contracts: 0, layers: 1 });

/** One row of a catalogue with its row of the loss table, so that both can be added, changed and moved as files are. */
interface Row {
  readonly name: string;
  readonly rate: number;
  readonly season: number;
  readonly group: number;
  readonly loss: {
    readonly mean: number;
    readonly sd: number;
    readonly share: number;
    readonly exposed: number;
  } | null;
}

function rowsOf(catalogue: Catalogue, table: LossTable): Row[] {
  const place = new Map([...table.eventIndex].map((event, r) => [event, r]));
  return catalogue.eventNames.map((name, i) => {
    const r = place.get(i);
    const loss =
      r === undefined
        ? null
        : {
            mean: table.meanLoss[r] ?? 0,
            sd: table.sd[r] ?? 0,
            share: table.commonShare[r] ?? 0,
            exposed: table.exposedValue[r] ?? 0,
          };
    return {
      name,
      rate: catalogue.ratePerYear[i] ?? 0,
      season: catalogue.seasonDay[i] ?? 0,
      group: catalogue.groupIndex[i] ?? -1,
      loss,
    };
  });
}

function inputsOf(rows: readonly Row[], over: Partial<Catalogue> = {}, inceptionDay = 1): ValuationInputs {
  const lossy = rows.flatMap(({ loss }, i) => (loss === null ? [] : [{ ...loss, event: i }]));
  const catalogue: Catalogue = {
    lineage: 'invented-wind',
    eventNames: rows.map(({ name }) => name),
    ratePerYear: Float64Array.from(rows, ({ rate }) => rate),
    perils: ['wind'],
    perilIndex: new Uint16Array(rows.length),
    regions: ['north'],
    regionIndex: new Uint16Array(rows.length),
    seasonDay: Float64Array.from(rows, ({ season }) => season),
    groups: [],
    groupIndex: Int32Array.from(rows, ({ group }) => group),
    ...over,
  };
  const table: LossTable = {
    lineage: 'portfolio',
    catalogueLineage: catalogue.lineage,
    eventIndex: Int32Array.from(lossy, ({ event }) => event),
    meanLoss: Float64Array.from(lossy, ({ mean }) => mean),
    sd: Float64Array.from(lossy, ({ sd }) => sd),
    commonShare: Float64Array.from(lossy, ({ share }) => share),
    exposedValue: Float64Array.from(lossy, ({ exposed }) => exposed),
    toContractCurrency: 1,
  };
  return {
    ...base,
    catalogues: [catalogue],
    programme: { ...base.programme, tables: [table], inceptionDay, layers: [inventedLayer('all', 10, 0)] },
  };
}

/** Losses of a block, one line an occurrence, by the event's name; every digit of the loss. */
function losses(inputs: ValuationInputs, block = 1): string[] {
  const workspace = openWorkspace(inputs);
  for (const task of WAVES.laws(workspace)) perform(workspace, task);
  perform(workspace, { kind: 'block', index: block });
  const { scratch, prepared, memory } = workspace;
  const count = drawLosses(scratch, prepared.programme, memory.laws, block);
  const names = prepared.catalogues.flatMap(({ catalogue }) => catalogue.eventNames);
  const { state, day } = scratch.occurrences;
  return Array.from({ length: count }, (_unused, n) => {
    const i = scratch.place[n] ?? 0;
    return [names[scratch.event[n] ?? 0], state[i], day[i], scratch.losses[i]].join(' ');
  }).sort();
}

const others = (lines: readonly string[]): string[] =>
  lines.filter((line) => !line.startsWith(`${CHANGED} `));
const missing = (from: readonly string[], lines: readonly string[]): string[] => {
  const there = new Set(lines);
  return from.filter((line) => !there.has(line));
};

describe('losses of a new version of a catalogue and its loss table', () => {
  const catalogue = inventedCatalogue(EVENTS, 2.5);
  const rows = rowsOf(catalogue, inventedTable(catalogue, 'portfolio', 80, 0.9, 7));
  const before = losses(inputsOf(rows));
  const change = (over: Partial<Row>): Row[] =>
    rows.map((row) => (row.name === CHANGED ? { ...row, ...over } : row));
  const loss = { mean: 7, sd: 3, share: 0.5, exposed: 90 };

  it('are many enough to tell', () => expect(before.length).toBeGreaterThan(1000));

  it('stay for all others, to the last digit, where one row of 20,000 has another rate', () => {
    const after = losses(inputsOf(change({ rate: 0.9, loss })));
    expect(others(after)).toEqual(others(before));
    expect(after.length).toBeGreaterThan(before.length + 500);
  });

  it('stay for the row itself too, and others join them, where its rate rises', () => {
    const seldom = losses(inputsOf(change({ rate: 0.4, loss })));
    const often = losses(inputsOf(change({ rate: 0.9, loss })));
    expect(missing(seldom, often)).toEqual([]);
    expect(often.length).toBeGreaterThan(seldom.length + 300);
  });

  it('stay for all others where one row has another loss, and fall on the same days of the same years', () => {
    const after = losses(inputsOf(change({ rate: 0.9, loss: { ...loss, mean: 9, sd: 8 } })));
    const former = losses(inputsOf(change({ rate: 0.9, loss })));
    expect(others(after)).toEqual(others(former));
    const days = (lines: readonly string[]): string[] =>
      lines.map((line) => line.split(' ').slice(0, 4).join(' ')).sort();
    expect(days(after)).toEqual(days(former));
    expect(after).not.toEqual(former);
  });

  it('stay where the row goes, where rows are added before it, and where the file is turned round', () => {
    expect(losses(inputsOf(rows.filter(({ name }) => name !== CHANGED)))).toEqual(others(before));
    const added: Row[] = ['new 1', 'new 2'].map((name) => ({
      name,
      rate: 0.3,
      season: Number.NaN,
      group: -1,
      loss,
    }));
    expect(losses(inputsOf([...added, ...rows])).filter((line) => !line.startsWith('new '))).toEqual(before);
    expect(losses(inputsOf([...rows].reverse()))).toEqual(before);
  });

  it('move with the name of the event, of the catalogue and of the table, and with the seed', () => {
    const inputs = inputsOf(rows);
    const [table] = inputs.programme.tables;
    if (table === undefined) throw new Error('a table was made above');
    const otherTable = {
      ...inputs,
      programme: { ...inputs.programme, tables: [{ ...table, lineage: 'another' }] },
    };
    const days = (lines: readonly string[]): string[] =>
      lines.map((line) => line.split(' ').slice(0, 4).join(' '));
    const after = losses(otherTable);
    // The same events on the same days, other losses.
    expect(days(after)).toEqual(days(before));
    expect(missing(before, after).length).toBeGreaterThan(0.9 * before.length);
    const otherSeed = losses({ ...inputs, grid: { ...inputs.grid, seed: '00112233445566fe' } });
    expect(missing(before, otherSeed).length).toBeGreaterThan(0.9 * before.length);
  });

  it('stay nearly all where the row is of a group: its rate moves the shape of the group’s years a little', () => {
    const groups = [{ name: 'storms', varianceToMean: 1.5 }];
    const grouped = rows.map((row) => ({ ...row, group: 0 }));
    const former = losses(inputsOf(grouped, { groups }));
    const after = losses(
      inputsOf(
        grouped.map((row) => (row.name === CHANGED ? { ...row, rate: row.rate * 3 } : row)),
        { groups },
      ),
    );
    expect(missing(others(former), after).length).toBeLessThan(0.005 * former.length);
    expect(missing(others(after), former).length).toBeLessThan(0.005 * former.length);
  });
});

describe('two loss tables on a catalogue', () => {
  const catalogue = inventedCatalogue(50, 4);
  const table = (lineage: string, share: number): LossTable => ({
    ...inventedTable(catalogue, lineage, 80, 1, 7),
    lineage,
    commonShare: new Float64Array(50).fill(share),
  });
  const scoresOf = (share: number) => {
    const loss = (lineage: string): number[] => {
      const inputs = {
        ...base,
        catalogues: [catalogue],
        programme: {
          ...base.programme,
          tables: [table(lineage, share)],
          layers: [inventedLayer('all', 10, 0)],
        },
      };
      return losses(inputs, 0).map((line) => Number(line.split(' ')[4]));
    };
    return [loss('mine'), loss('theirs')] as const;
  };

  it('with everything in common lose the same; with nothing, their losses given the event have nothing to do with one another', () => {
    const [mine, theirs] = scoresOf(1);
    expect(mine.length).toBeGreaterThan(50_000);
    expect(theirs).toEqual(mine);
    const apart = scoresOf(0);
    const same = apart[0].filter((x, i) => x === apart[1][i]).length;
    // A few rows are certain: there is nothing to draw.
    expect(same).toBeLessThan(0.1 * mine.length);
  });
});

describe('the day of inception', () => {
  const catalogue = inventedCatalogue(400, 6);
  const rows = rowsOf(catalogue, inventedTable(catalogue, 'portfolio', 80, 1, 7));
  const drawn = (inceptionDay: number): Occurrences => {
    const out = new Occurrences(400);
    drawOccurrences(
      out,
      [{ catalogue, keys: catalogueKeys(catalogue, SEED), firstEvent: 0, rate: catalogue.ratePerYear }],
      0,
      BLOCK_STATES,
      inceptionDay,
    );
    return out;
  };

  it.each([2, 100, 365])(
    'on day %p turns the year: the same occurrences, their days counted from it',
    (inceptionDay) => {
      const [plain, turned] = [drawn(1), drawn(inceptionDay)];
      expect(turned.count).toBe(plain.count);
      for (const column of ['state', 'ordinal', 'score'] as const) {
        expect(turned[column].subarray(0, plain.count)).toEqual(plain[column].subarray(0, plain.count));
      }
      const off = [...turned.day.subarray(0, plain.count)].filter((day, i) => {
        const calendar = plain.day[i] ?? 0;
        const since = calendar - (inceptionDay - 1);
        return day !== (since < 0 ? since + 365 : since);
      });
      expect(off).toEqual([]);
    },
  );

  it('puts an event with a season before or behind it', () => {
    const season = rows.map((row) => ({ ...row, season: 100 }));
    const days = (inceptionDay: number): Set<number> => {
      const workspace = openWorkspace(inputsOf(season, {}, inceptionDay));
      for (const task of WAVES.laws(workspace)) perform(workspace, task);
      const found = perform(workspace, { kind: 'block', index: 1 });
      if (found.kind !== 'block') throw new Error('a block was asked for');
      return new Set(blockIn(found.memory).losses.day);
    };
    // Day 100 is 99 days after 1 January, none after itself, and 364 after the day behind it.
    expect([1, 100, 101, 300].map((inceptionDay) => [...days(inceptionDay)])).toEqual([
      [99],
      [0],
      [364],
      [165],
    ]);
  });

  it('orders the losses of a year', () => {
    const order = (inceptionDay: number) => {
      const workspace = openWorkspace(inputsOf(rows, {}, inceptionDay));
      for (const task of WAVES.laws(workspace)) perform(workspace, task);
      const found = perform(workspace, { kind: 'block', index: 1 });
      if (found.kind !== 'block') throw new Error('a block was asked for');
      const { state, day, loss, count } = blockIn(found.memory).losses;
      for (let i = 1; i < count; i += 1) {
        const [before, own] = [state[i - 1] ?? 0, state[i] ?? 0];
        expect(before).toBeLessThanOrEqual(own);
        if (before === own) expect(day[i - 1]).toBeLessThanOrEqual(day[i] ?? -1);
      }
      return Array.from({ length: count }, (_unused, i) => [state[i], loss[i]].join(' '));
    };
    const [january, july] = [order(1), order(182)];
    // The same losses in the same years, in another order.
    expect([...july].sort()).toEqual([...january].sort());
    expect(july).not.toEqual(january);
  });
});
