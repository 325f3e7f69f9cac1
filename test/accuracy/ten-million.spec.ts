import type { LayerValuation, Valuation } from '../../worker/engine';
import { exceedanceOf, severityOf } from '../../worker/engine/losses/severity';
import { valuedByEngine } from '../reference/engine';
import { compensated } from './compensated-sum';
import { STATES, tenMillionRun } from './ten-million-run';

// Taken once: jest hands out every use of a global slowly.
const { abs, expm1, floor: floorOf, log, max, pow, sqrt } = Math;

const inputs = tenMillionRun();
const { basis, programme } = inputs;
const [table] = programme.tables;
const [catalogue] = inputs.catalogues;
if (table === undefined || catalogue === undefined || basis.discounting.mode !== 'anchored') {
  throw new Error('the run has a table on a catalogue, and is anchored');
}
const { risklessRate } = basis.discounting;

type Figures = Record<string, readonly [found: number, expected: number]>;

/** The figures that are further apart than a relative distance. */
function apart(figures: Figures, relative: number): object[] {
  return Object.entries(figures)
    .filter(([, [found, expected]]) => !(abs(found - expected) <= relative * max(abs(found), abs(expected))))
    .map(([figure, [found, expected]]) => ({ figure, found, expected }));
}

/** P(some occurrence of the year is over a loss), exact: a Poisson number of them is. */
function probabilityOver(loss: number): number {
  let rate = 0;
  table?.eventIndex.forEach((event, row) => {
    const severity = severityOf(
      table.meanLoss[row] ?? 0,
      table.sd[row] ?? 0,
      table.exposedValue[row] ?? Number.NaN,
    );
    rate += (catalogue?.ratePerYear[event] ?? 0) * exceedanceOf(severity, loss).probability;
  });
  return -expm1(-rate);
}

describe('ten million states', () => {
  let run: Valuation;
  /** u′(k) of every state, and Σ of it. */
  let slope: Float64Array;
  let slopes: number;
  let meanCapital: number;

  beforeAll(async () => {
    run = await valuedByEngine(inputs);
    const { capital } = run.series;
    const { floor, riskAversion } = basis;
    slope = new Float64Array(STATES);
    for (let s = 0; s < STATES; s += 1) slope[s] = pow(max(capital[s] ?? 0, floor), -riskAversion);
    slopes = compensated(STATES, (s) => slope[s] ?? 0);
    meanCapital = compensated(STATES, (s) => capital[s] ?? 0) / STATES;
  }, 240_000);

  const layer = (
    l: number,
  ): {
    valuation: LayerValuation;
    sum: (term: (z: number, rho: number, u: number) => number) => number;
    paying: number;
  } => {
    const valuation = run.layers[l];
    const paying = run.series.paying[l];
    if (valuation === undefined || paying === undefined) throw new Error(`the run has no layer ${l}`);
    const { state, payoff, reinstatement } = paying;
    const sum = (term: (z: number, rho: number, u: number) => number): number =>
      compensated(state.length, (i) =>
        term(payoff[i] ?? 0, reinstatement[i] ?? 0, slope[state[i] ?? 0] ?? 0),
      );
    return { valuation, sum, paying: state.length };
  };

  it('are what the run has, and pass its own check', () => {
    expect(run.series.capital).toHaveLength(STATES);
    expect(run.selfCheck).toMatchObject({ flagged: false });
    // A few states lie on the floor, so that its share is a sum too.
    expect(run.house.floorShare).toBeGreaterThan(1e-4);
    expect(run.house.floorShare).toBeLessThan(0.02);
  });

  it('lose no digit of the house: a sure unit is worth 1/(1 + r)', () => {
    const { discount, sureValue, largestSharpeRatio, effectiveStates, floorShare } = run.house;
    const squares = compensated(STATES, (s) => (slope[s] ?? 0) * (slope[s] ?? 0));
    const mean = slopes / STATES;
    const scatter = compensated(STATES, (s) => ((slope[s] ?? 0) - mean) * ((slope[s] ?? 0) - mean));
    const { capital } = run.series;
    const onFloor = compensated(STATES, (s) => ((capital[s] ?? 0) <= basis.floor ? (slope[s] ?? 0) : 0));
    expect(
      apart(
        {
          'E[m]': [sureValue, 1 / (1 + risklessRate)],
          'E[m], from capital': [(discount * slopes) / STATES, 1 / (1 + risklessRate)],
          'effective states': [effectiveStates, (slopes * slopes) / squares],
          'sd(m)/E[m]': [largestSharpeRatio, sqrt(scatter / STATES) / mean],
          'share of the floor': [floorShare, onFloor / slopes],
        },
        1e-12,
      ),
    ).toEqual([]);
  });

  it.each([0, 1])('lose no digit of the sums over a layer’s paying states: layer %p', (l) => {
    const { valuation, sum } = layer(l);
    const { split } = valuation;
    const { discount } = run.house;
    const mean = sum((z) => z) / STATES;
    const priced = (discount * sum((z, _rho, u) => u * z)) / STATES;
    const pricedSquares = sum((z, _rho, u) => u * z * (u * z));
    const back = (discount * sum((_z, rho, u) => u * rho)) / STATES;
    const spread = sum((z) => (z - mean) * (z - mean)) + (STATES - layer(l).paying) * mean * mean;
    const deviation = sqrt(spread / (STATES - 1));
    const deductions = (programme.layers[l]?.brokerage ?? 0) + basis.taxes + basis.variableExpense;
    const fixed = basis.fixedExpensePerContract / programme.layers.length / (programme.layers[l]?.line ?? 1);
    const marginal =
      (priced * (1 + basis.lossAdjustment) + fixed) / (1 - deductions + (1 - basis.taxes) * back);
    expect(
      apart(
        {
          'E[Z]': [valuation.expectedLoss.value, mean],
          'sd(Z)': [valuation.standardDeviation, deviation],
          'error of E[Z]': [valuation.expectedLoss.standardError, deviation / sqrt(STATES)],
          'E[ρ]': [valuation.expectedReinstatement.value, sum((_z, rho) => rho) / STATES],
          'E[m·Z]': [split.risklessLoss + split.leanLoad, priced],
          'E[m]·E[Z]': [split.risklessLoss, mean / (1 + risklessRate)],
          'price-weighted P(Z > 0)': [
            valuation.pricedAttachmentProbability.value,
            sum((_z, _rho, u) => u) / slopes,
          ],
          'effective states': [
            valuation.effectiveStates,
            (priced * priced) / (pricedSquares * (discount / STATES) * (discount / STATES)),
          ],
          'marginal premium': [valuation.marginalPremium.value, marginal],
        },
        1e-12,
      ),
    ).toEqual([]);
  });

  it.each([0, 1])('fill a lens and tenths whose areas are the price: layer %p', (l) => {
    const { valuation } = layer(l);
    const limit = programme.layers[l]?.limit ?? Number.NaN;
    const area = (of: 'plain' | 'product'): number =>
      compensated(run.lens.length, (b) => {
        const bin = run.lens[b];
        const width = b === 0 ? log(10) / 12 : log((bin?.shareTo ?? 1) / (bin?.shareFrom ?? 1));
        return (bin?.[of][l] ?? Number.NaN) * width;
      });
    const tenths = (of: 'lossShare' | 'priceShare'): number =>
      valuation.deciles.reduce((sum, tenth) => sum + tenth[of], 0);
    expect(
      apart(
        {
          'expected loss': [area('plain') * limit, valuation.expectedLoss.value],
          price: [
            area('product') * limit * run.house.sureValue,
            valuation.split.risklessLoss + valuation.split.leanLoad,
          ],
          'tenths of the loss': [tenths('lossShare'), 1],
          'tenths of the price': [tenths('priceShare'), 1],
          'capital of the tenths': [
            valuation.deciles.reduce((sum, tenth) => sum + tenth.meanCapital / 10, 0),
            meanCapital,
          ],
        },
        1e-10,
      ),
    ).toEqual([]);
  });

  it('fill a lens with the means of the states between two ranks, leanest first', () => {
    const { floor, riskAversion } = basis;
    const inOrder = new Float64Array(run.series.capital).sort();
    const hungerAt = (rank: number): number => pow(max(inOrder[rank] ?? 0, floor), -riskAversion);
    let from = 0;
    const figures = run.lens.map(
      ({ shareTo, hunger, meanCapital: found }, b): [string, Figures[string]][] => {
        const to = floorOf(shareTo * STATES);
        const mean = (of: (rank: number) => number): number =>
          compensated(to - from, (i) => of(from + i)) / (to - from);
        const expected = {
          hunger: (mean(hungerAt) * STATES) / slopes,
          capital: mean((rank) => inOrder[rank] ?? 0),
        };
        from = to;
        return [
          [`hunger in bin ${b}`, [hunger, expected.hunger]],
          [`capital in bin ${b}`, [found, expected.capital]],
        ];
      },
    );
    expect(from).toBe(STATES);
    expect(apart(Object.fromEntries(figures.flat()), 1e-10)).toEqual([]);
  });

  it('count the states in which a layer pays, and is exhausted', () => {
    const [lower, upper] = [0, 1].map((l) => {
      const { valuation, sum, paying } = layer(l);
      const { limit, reinstatements, attachment } = programme.layers[l] ?? {
        limit: 0,
        reinstatements: [],
        attachment: 0,
      };
      const cover = limit * (reinstatements.length + 1);
      expect(valuation.attachmentProbability.value).toBe(paying / STATES);
      expect(valuation.exhaustionProbability.value).toBe(sum((z) => (z >= cover ? 1 : 0)) / STATES);
      const { value, standardError } = valuation.attachmentProbability;
      const errors = (value - probabilityOver(attachment)) / standardError;
      expect({ layer: valuation.key, errors, fair: abs(errors) <= 4 }).toMatchObject({ fair: true });
      return { ...valuation, exhaustion: valuation.exhaustionProbability.value };
    });
    if (lower === undefined || upper === undefined) throw new Error('the run has two layers');
    expect(lower.attachmentProbability.value).toBeGreaterThan(upper.attachmentProbability.value);
    expect(lower.attachmentProbability.value).toBeGreaterThan(lower.exhaustion);
    expect(upper.attachmentProbability.value).toBeGreaterThan(upper.exhaustion);
    // Lean states are dearer, and both layers pay in them.
    for (const { pricedAttachmentProbability, attachmentProbability } of [lower, upper]) {
      expect(pricedAttachmentProbability.value).toBeGreaterThan(attachmentProbability.value);
    }
    // Of adjoining layers the upper one pays where an occurrence has taken the lower one's whole limit, and nowhere else.
    const paid = new Float64Array(STATES);
    const [below, above] = run.series.paying;
    below?.state.forEach((s, i) => (paid[s] = below.payoff[i] ?? 0));
    const least = programme.layers[0]?.limit ?? Infinity;
    expect(above?.state.findIndex((s) => (paid[s] ?? 0) < least)).toBe(-1);
  });

  it('put the losses of the exceedance curve where their exact probability is 1 in N', () => {
    const off = run.programme.occurrence.map(({ years, value }) => {
      const probability = probabilityOver(value ?? Number.NaN);
      return {
        years,
        value,
        probability,
        errors: (probability - 1 / years) / sqrt(((1 / years) * (1 - 1 / years)) / STATES),
      };
    });
    expect(off.filter(({ errors }) => !(abs(errors) <= 4))).toEqual([]);
  });

  it('put the house’s loss of 1 in N years at the right rank of capital', () => {
    const { capital } = run.series;
    const free = capital.reduce((most, k) => max(most, k), 0);
    for (const { years, value, tailValue } of run.house.tailBefore) {
      const loss = value ?? Number.NaN;
      let [over, reached] = [0, 0];
      const excess = compensated(STATES, (s) => {
        const own = (free - (capital[s] ?? 0)) * basis.capital;
        if (own > loss * (1 + 1e-9)) over += 1;
        if (own >= loss * (1 - 1e-9)) reached += 1;
        return max(own - loss, 0);
      });
      const told = { years, over: over <= STATES / years, reached: reached > STATES / years };
      expect(told).toEqual({ years, over: true, reached: true });
      expect(
        apart({ 'tail value': [tailValue ?? Number.NaN, loss + (years * excess) / STATES] }, 1e-10),
      ).toEqual([]);
    }
  });
});
