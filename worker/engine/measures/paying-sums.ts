import type { LayerStates } from '../layers/layer-states';

/** Sums over a layer's paying states that its measures and its marginal premium are made of; u = u′(k). */
export interface PayingSums {
  readonly payoff: number;
  readonly payoffSquares: number;
  readonly reinstatement: number;
  readonly reinstatementSquares: number;
  /** Σ u·Z, Σ (u·Z)², Σ u·ρ, Σ u and Σ u². */
  readonly pricedPayoff: number;
  readonly pricedPayoffSquares: number;
  readonly pricedReinstatement: number;
  readonly slope: number;
  readonly slopeSquares: number;
  /** Σ u²·Z, Σ u²·ρ, Σ u²·Z·ρ and Σ (u·ρ)². */
  readonly squaredPayoff: number;
  readonly squaredReinstatement: number;
  readonly squaredCross: number;
  readonly pricedReinstatementSquares: number;
  /** Paying states in which the layer pays `cover` or more. */
  readonly exhausted: number;
}

const SUMS = 13;

/** All sums in one pass, within each block and the blocks' sums in order. */
export function payingSums(paying: LayerStates, slopes: Float64Array, cover: number): PayingSums {
  const { blockStart, state, payoff, reinstatement } = paying;
  const total = new Float64Array(SUMS);
  let exhausted = 0;
  for (let b = 0; b + 1 < blockStart.length; b += 1) {
    let [z0, z2, r0, r2, uz, uz2, ur, u1, u2, u2z, u2r, u2zr, ur2] = [0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0];
    const to = blockStart[b + 1] ?? 0;
    for (let i = blockStart[b] ?? 0; i < to; i += 1) {
      const z = payoff[i] ?? 0;
      const r = reinstatement[i] ?? 0;
      const u = slopes[state[i] ?? 0] ?? 0;
      const pz = u * z;
      const pr = u * r;
      z0 += z;
      z2 += z * z;
      r0 += r;
      r2 += r * r;
      uz += pz;
      uz2 += pz * pz;
      ur += pr;
      ur2 += pr * pr;
      u1 += u;
      u2 += u * u;
      u2z += u * pz;
      u2r += u * pr;
      u2zr += pz * pr;
      if (z >= cover) exhausted += 1;
    }
    [z0, z2, r0, r2, uz, uz2, ur, u1, u2, u2z, u2r, u2zr, ur2].forEach((sum, k) => (total[k] = (total[k] ?? 0) + sum));
  }
  const [z0 = 0, z2 = 0, r0 = 0, r2 = 0, uz = 0, uz2 = 0, ur = 0, u1 = 0, u2 = 0, u2z = 0, u2r = 0, u2zr = 0, ur2 = 0] = total;
  return {
    payoff: z0, payoffSquares: z2, reinstatement: r0, reinstatementSquares: r2, pricedPayoff: uz, pricedPayoffSquares: uz2, pricedReinstatement: ur,
    slope: u1, slopeSquares: u2, squaredPayoff: u2z, squaredReinstatement: u2r, squaredCross: u2zr, pricedReinstatementSquares: ur2, exhausted,
  };
}
