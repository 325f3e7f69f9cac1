/**
 * Sums over states of the utility gained by one and the same small change c of capital, from power series in c:
 * u(k + c) − u(k) = Σ_j (−1)^j·(γ)_j/(j + 1)!·k^(−γ−j)·c^(j+1). A layer pays in few states; in all others its premium is such a
 * change, so that the sums over them cost one pass for all layers together instead of one an iteration and layer.
 */
export const TERMS = 12;
const SQUARE_TERMS = 3;

/** Σ u′(k)·k^(−j) for j = 0..TERMS − 1, and Σ u′(k)²·k^(−j) for j = 0..2. */
export interface CommonMoments {
  readonly slopes: Float64Array;
  readonly squares: Float64Array;
}

export function noMoments(): CommonMoments {
  return { slopes: new Float64Array(TERMS), squares: new Float64Array(SQUARE_TERMS) };
}

export function addState(moments: CommonMoments, k: number, slope: number): void {
  const inverse = 1 / k;
  let term = slope;
  for (let j = 0; j < TERMS; j += 1) {
    moments.slopes[j] = (moments.slopes[j] ?? 0) + term;
    term *= inverse;
  }
  term = slope * slope;
  for (let j = 0; j < SQUARE_TERMS; j += 1) {
    moments.squares[j] = (moments.squares[j] ?? 0) + term;
    term *= inverse;
  }
}

/** Adds the states of the list that are far from the floor: the same sums, kept in registers. */
export function addStates(moments: CommonMoments, list: Uint32Array, house: { readonly capital: Float64Array; readonly slope: Float64Array; readonly nearBelow: number }): void {
  const { capital, slope, nearBelow } = house;
  let [a, b, c, d, e, f, g, h, m, n, o, p, x, y, z] = [0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0];
  for (let i = 0; i < list.length; i += 1) {
    const s = list[i] ?? 0;
    const k = capital[s] ?? 0;
    if (k < nearBelow) continue;
    const inverse = 1 / k;
    const first = slope[s] ?? 0;
    let term = first;
    a += term;
    b += term *= inverse;
    c += term *= inverse;
    d += term *= inverse;
    e += term *= inverse;
    f += term *= inverse;
    g += term *= inverse;
    h += term *= inverse;
    m += term *= inverse;
    n += term *= inverse;
    o += term *= inverse;
    p += term *= inverse;
    term = first * first;
    x += term;
    y += term *= inverse;
    z += term *= inverse;
  }
  const { slopes, squares } = moments;
  [a, b, c, d, e, f, g, h, m, n, o, p].forEach((sum, j) => (slopes[j] = (slopes[j] ?? 0) + sum));
  [x, y, z].forEach((sum, j) => (squares[j] = (squares[j] ?? 0) + sum));
}

/** a + sign·b. */
export function combined(a: CommonMoments, b: CommonMoments, sign: 1 | -1): CommonMoments {
  return {
    slopes: a.slopes.map((x, j) => x + sign * (b.slopes[j] ?? 0)),
    squares: a.squares.map((x, j) => x + sign * (b.squares[j] ?? 0)),
  };
}

const LARGEST_REMAINDER = 1e-15;

/** Whether the series, cut after its terms, is exact to doubles where |c| ≤ ratio·k: (γ)_J/J!·ratio^J. */
export function seriesHolds(riskAversion: number, ratio: number): boolean {
  if (!(ratio < 0.2)) return false;
  let remainder = 1;
  for (let j = 0; j < TERMS; j += 1) remainder *= ((riskAversion + j) / (j + 1)) * ratio;
  return remainder < LARGEST_REMAINDER;
}

/** Σ [u(k + c) − u(k)] and Σ u′(k + c). */
export function commonGain({ slopes }: CommonMoments, riskAversion: number, c: number): { gain: number; slope: number } {
  let gain = 0;
  let slope = 0;
  let factor = 1;
  for (let j = 0; j < TERMS; j += 1) {
    const term = factor * (slopes[j] ?? 0);
    slope += term;
    gain += (term * c) / (j + 1);
    factor *= (-(riskAversion + j) / (j + 1)) * c;
  }
  return { gain, slope };
}

/** Σ [u(k + c) − u(k)]², to third order in γ·c/k: it serves standard errors only. */
export function commonSquares({ squares }: CommonMoments, riskAversion: number, c: number): number {
  const [zeroth = 0, first = 0, second = 0] = squares;
  const curve = (riskAversion * riskAversion) / 4 + (riskAversion * (riskAversion + 1)) / 3;
  return c * c * (zeroth - riskAversion * c * first + curve * c * c * second);
}
