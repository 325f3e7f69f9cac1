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

const BLOCKS = 1;
/** Number of a catalogue's occurrences in each state, by the class of their event; events of class −1 are left out. */
function countsBy(
  catalogue: Catalogue,
  rate: Float64Array,
  classes: number,
  classOf: (event: number) => number,
): Float64Array[] {
  const out = new Occurrences(catalogue.eventNames.length);
  const keys = catalogueKeys(catalogue, SEED);
  const found = Array.from({ length: classes }, () => new Float64Array(BLOCKS * BLOCK_STATES));
  for (let block = 0; block < BLOCKS; block += 1) {
    drawOccurrences(out, [{ catalogue, keys, firstEvent: 0, rate }], block, BLOCK_STATES, 1);
    for (let e = 0; e < rate.length; e += 1) {
      const into = found[classOf(e)];
      if (into === undefined) continue;
      for (let i = out.eventStart[e] ?? 0; i < (out.eventStart[e + 1] ?? 0); i += 1) {
        const s = block * BLOCK_STATES + (out.state[i] ?? 0);
        into[s] = (into[s] ?? 0) + 1;
      }
    }
  }
  return found;
}

function counts(catalogue: Catalogue, rate: Float64Array): Float64Array {
  return countsBy(catalogue, rate, 1, () => 0)[0] ?? new Float64Array(0);
}

/** Mean and ratio of variance to mean, with the standard error of each under a negative binomial law of that ratio. */
function moments(found: Float64Array, ratio: number) {
  const n = found.length;
  const mean = found.reduce((a, b) => a + b, 0) / n;
  const central = (power: number): number => found.reduce((a, b) => a + (b - mean) ** power, 0) / n;
  const variance = central(2);
  const meanError = Math.sqrt((ratio * mean) / n);
  const ratioError = Math.sqrt((central(4) - variance * variance) / n) / mean + (ratio * meanError) / mean;
  return { mean, meanError, ratio: variance / mean, ratioError };
}

function expectMoments(found: Float64Array, mean: number, ratio: number): void {
  const m = moments(found, ratio);
  expect({ ...m, off: Math.abs(m.mean - mean) > 4 * m.meanError }).toEqual({ ...m, off: false });
  expect({ ...m, off: Math.abs(m.ratio - ratio) > 4 * m.ratioError }).toEqual({ ...m, off: false });
}

describe('seasons of a group', () => {
  const EVENTS_OF_GROUP = 120;
  const V = 2.2;
  const catalogue: Catalogue = {
    ...inventedCatalogue(EVENTS_OF_GROUP, 3),
    groups: [{ name: 'storms', varianceToMean: V }],
    groupIndex: new Int32Array(EVENTS_OF_GROUP).fill(0),
  };
  const { ratePerYear } = catalogue;

  it('are negative binomial with the group’s ratio of variance to mean', () =>
    expectMoments(counts(catalogue, ratePerYear), 3, V));

  it('of a part that holds share h of the rate have ratio 1 + (V − 1)·h', () => {
    // A half, three tenths and a fifth of the events.
    const part = (e: number): number => (e % 10 < 5 ? 0 : e % 10 < 8 ? 1 : 2);
    countsBy(catalogue, ratePerYear, 3, part).forEach((found, p) => {
      const held = ratePerYear.reduce((sum, own, e) => sum + (part(e) === p ? own : 0), 0);
      expectMoments(found, held, 1 + ((V - 1) * held) / 3);
    });
  });

  it.each([0.4, 1.8])(
    'under a rate factor f keep the shape of the catalogue’s own rates: ratio 1 + (V − 1)·f at f = %p',
    (factor) => {
      const scaled = counts(
        catalogue,
        ratePerYear.map((own) => own * factor),
      );
      expectMoments(scaled, 3 * factor, 1 + (V - 1) * factor);
    },
  );

  it('under a rate factor below 1 are some of those without, state by state', () => {
    const all = counts(catalogue, ratePerYear);
    const some = counts(
      catalogue,
      ratePerYear.map((own) => own * 0.4),
    );
    expect(some.filter((n, s) => n > (all[s] ?? 0)).length).toBe(0);
  });

  it('of a catalogue whose own rates are lower keep the ratio: there the shape is another', () => {
    const lower = { ...catalogue, ratePerYear: ratePerYear.map((own) => own * 0.4) };
    expectMoments(counts(lower, lower.ratePerYear), 1.2, V);
  });

  it('of two groups have nothing to do with one another, and events of none are Poisson', () => {
    const groupIndex = Int32Array.from({ length: EVENTS_OF_GROUP }, (_unused, e) => (e % 3) - 1);
    const both: Catalogue = {
      ...catalogue,
      groups: [
        { name: 'storms', varianceToMean: V },
        { name: 'floods', varianceToMean: 4 },
      ],
      groupIndex,
    };
    const rateOf = (group: number): number =>
      ratePerYear.reduce((sum, own, e) => sum + (groupIndex[e] === group ? own : 0), 0);
    const [none, storms, floods] = countsBy(both, ratePerYear, 3, (e) => (groupIndex[e] ?? 0) + 1);
    if (none === undefined || storms === undefined || floods === undefined)
      throw new Error('three were drawn');
    expectMoments(none, rateOf(-1), 1);
    expectMoments(storms, rateOf(0), V);
    expectMoments(floods, rateOf(1), 4);
    const n = storms.length;
    const [a, b] = [moments(storms, V), moments(floods, 4)];
    const covariance = storms.reduce((sum, x, s) => sum + (x - a.mean) * ((floods[s] ?? 0) - b.mean), 0) / n;
    expect(Math.abs(covariance) / Math.sqrt(a.ratio * a.mean * b.ratio * b.mean)).toBeLessThan(
      4 / Math.sqrt(n),
    );
  });

  it('reach the price through the rate factor: the valuation draws the scaled rates on the unscaled shape', () => {
    const inputs: ValuationInputs = {
      ...base,
      catalogues: [{ ...catalogue, rateFactor: new Float64Array(EVENTS_OF_GROUP).fill(0.4) }],
    };
    const { prepared } = openWorkspace({
      ...inputs,
      programme: { ...inputs.programme, tables: [inventedTable(catalogue, 'p', 80, 1, 7)] },
    });
    const [home] = prepared.catalogues;
    expect(home?.rate).toEqual(ratePerYear.map((own) => own * 0.4));
    expect(home?.keys.groups[0]?.shape).toBeCloseTo(3 / (V - 1), 12);
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
      return Array.from({ length: count }, (_unused, i) => `${state[i]} ${loss[i]}`);
    };
    const [january, july] = [order(1), order(182)];
    // The same losses in the same years, in another order.
    expect([...july].sort()).toEqual([...january].sort());
    expect(july).not.toEqual(january);
  });
});
