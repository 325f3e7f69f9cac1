import { addState, noMoments, seriesHolds } from './common-change';
import type { House } from './house';
import { IdleStates } from './idle-states';
import { marginalUtility, slopeAfter, utilityGain } from './utility';

const STATES = 4000;
const FLOOR = 0.25;
/** Where the series stops being used, as the house has it. */
const NEAR_BELOW = 0.5;
/** A fixed walk over [0, 1). */
const spread = (i: number): number => (i * 0.6180339887498949) % 1;

/** A house of which most states are plentiful and few lean, as a book of catastrophe cover makes it. */
function houseOf(riskAversion: number, lean: (u: number) => number): House {
  const capital = Float64Array.from({ length: STATES }, (_unused, i) => 1.06 - lean(spread(i + 1)));
  const preferences = { riskAversion, floor: FLOOR };
  const slope = capital.map((k) => marginalUtility(k, preferences));
  const common = noMoments();
  const near: number[] = [];
  capital.forEach((k, s) => (k < NEAR_BELOW ? near.push(s) : addState(common, k, slope[s] ?? 0)));
  const slopeSum = slope.reduce((a, b) => a + b, 0);
  const slopeSquares = slope.reduce((a, b) => a + b * b, 0);
  return {
    states: STATES,
    preferences,
    capital,
    slope,
    discount: 1,
    slopeSum,
    slopeSquares,
    sureValue: slopeSum / STATES,
    risklessRate: 0,
    largestSharpeRatio: 0,
    floorShare: 0,
    effectiveStates: STATES,
    netPremium: 0,
    nearBelow: NEAR_BELOW,
    near,
    common,
  };
}

/** No state near the floor; some between the floor and the bound; some below the floor and ruined. */
const SHAPES = {
  'far from the floor': (u: number) => 0.5 * u ** 20,
  'near the floor': (u: number) => 0.8 * u ** 10,
  'below the floor': (u: number) => 1.9 * u ** 8,
} as const;

/** Every seventh state pays, and the leanest ones do. */
function payingOf({ capital }: House): Uint32Array {
  return Uint32Array.from([...capital.keys()].filter((s) => s % 7 === 0 || (capital[s] ?? 0) < 0.4));
}

/** Sums over the idle states one by one, without any series; compensated, so that they are exact to doubles. */
function direct(
  house: House,
  paying: Uint32Array,
  c: number,
): { gain: number; slope: number; squares: number } {
  const pays = new Set(paying);
  const sums = { gain: [0, 0], slope: [0, 0], squares: [0, 0] };
  // T. J. Dekker (1971), A floating-point technique for extending the available precision: the error of a sum.
  const add = (sum: number[], x: number): void => {
    const [high = 0, low = 0] = sum;
    const total = high + x;
    const part = total - high;
    sum[1] = low + (high - (total - part) + (x - part));
    sum[0] = total;
  };
  house.capital.forEach((k, s) => {
    if (pays.has(s)) return;
    const gain = utilityGain(k, c, house.preferences);
    add(sums.gain, gain);
    add(sums.squares, gain * gain);
    add(sums.slope, marginalUtility(k + c, house.preferences));
  });
  const value = ([high = 0, low = 0]: number[]): number => high + low;
  return { gain: value(sums.gain), slope: value(sums.slope), squares: value(sums.squares) };
}

const GAMMAS = [0, 0.5, 1, 6, 15] as const;
const CHANGES = [1e-9, -1e-9, 1e-6, 1e-4, -1e-3, 4e-3, 0.02, -0.02, 0.09, 0.3, -0.3, 2] as const;

describe.each(
  GAMMAS.flatMap((gamma) =>
    Object.keys(SHAPES).map((shape) => [gamma, shape as keyof typeof SHAPES] as const),
  ),
)('sums over idle states, risk aversion %p, %s', (gamma, shape) => {
  const house = houseOf(gamma, SHAPES[shape]);

  it.each([
    ['few paying states', payingOf(house)],
    ['none paying', new Uint32Array(0)],
  ])('are the direct sums: %s', (_name, paying) => {
    const idle = new IdleStates(house, paying);
    for (const c of CHANGES) {
      const expected = direct(house, paying, c);
      const { gain, slope, squares } = idle.gain(c);
      const off = { gain: Math.abs(gain / expected.gain - 1), slope: Math.abs(slope / expected.slope - 1) };
      expect({ c, ...off, fine: off.gain < 1e-12 && off.slope < 1e-12 }).toEqual({ c, ...off, fine: true });
      // Squares serve standard errors only: to third order in γ·c/k.
      const squaresOff = Math.abs(squares / expected.squares - 1);
      const bound = 1e-11 + 2 * (((gamma + 2) * Math.abs(c)) / NEAR_BELOW) ** 3;
      expect({ c, squaresOff, fine: squaresOff < bound }).toEqual({ c, squaresOff, fine: true });
    }
  });

  it('of no change are nothing gained, and the slopes as they are', () => {
    const idle = new IdleStates(house, new Uint32Array(0));
    const { gain, slope, squares } = idle.gain(0);
    expect([gain, squares].map(Math.abs)).toEqual([0, 0]);
    expect(Math.abs(slope / house.slopeSum - 1)).toBeLessThan(1e-13);
  });

  it('are nothing where every state pays', () => {
    const idle = new IdleStates(house, Uint32Array.from(house.capital.keys()));
    for (const c of [1e-4, -1e-3, 0.5]) {
      const whole = direct(house, new Uint32Array(0), c);
      const { gain, slope } = idle.gain(c);
      expect({
        c,
        gain: Math.abs(gain / whole.gain) < 1e-13,
        slope: Math.abs(slope / whole.slope) < 1e-13,
      }).toEqual({
        c,
        gain: true,
        slope: true,
      });
    }
  });
});

describe('the series', () => {
  it('is used for small changes and left for large ones, for every risk aversion', () => {
    const widest = GAMMAS.map(
      (gamma) => CHANGES.filter((c) => seriesHolds(gamma, Math.abs(c) / NEAR_BELOW)).length,
    );
    // Both ways are met above at every risk aversion; the more averse, the sooner it is left.
    expect(Math.min(...widest)).toBeGreaterThan(3);
    expect(Math.max(...widest)).toBeLessThan(CHANGES.length);
    expect([...widest].sort((a, b) => b - a)).toEqual(widest);
  });

  it('is not used where it is no number', () => {
    expect([Number.NaN, Infinity, 0.2].map((ratio) => seriesHolds(2, ratio))).toEqual([false, false, false]);
  });
});

describe('the slope after a change, from the gain', () => {
  it.each(GAMMAS)('is that of the capital after it: risk aversion %p', (gamma) => {
    const preferences = { riskAversion: gamma, floor: FLOOR };
    for (const k of [-1, 0.1, FLOOR, 0.3, 1, 1.2]) {
      const before = marginalUtility(k, preferences);
      for (const c of CHANGES) {
        const expected = marginalUtility(k + c, preferences);
        const found = slopeAfter(k, before, c, utilityGain(k, c, preferences), preferences);
        expect({ k, c, off: Math.abs(found / expected - 1) < 1e-11 }).toEqual({ k, c, off: true });
      }
    }
  });
});
