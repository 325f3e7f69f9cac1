import { addStates, combined, commonGain, commonSquares, noMoments, seriesHolds, type CommonMoments } from './common-change';
import type { House } from './house';
import { slopeAfter, utilityGainFrom } from './utility';

/** The states in which a deal pays nothing: its premium changes capital by the same amount in all of them. */
export class IdleStates {
  private readonly moments: CommonMoments;
  /** Those near the floor, where the series does not hold. */
  private readonly near: readonly number[];

  /** @param paying the other states, rising */
  constructor(
    private readonly house: House,
    private readonly paying: Uint32Array,
  ) {
    const far = noMoments();
    addStates(far, paying, house);
    this.moments = combined(house.common, far, -1);
    this.near = without(house.near, paying);
  }

  /** Σ [u(k + c) − u(k)], Σ u′(k + c) and Σ [u(k + c) − u(k)]². */
  gain(c: number): { gain: number; slope: number; squares: number } {
    const { house } = this;
    const { riskAversion } = house.preferences;
    const holds = seriesHolds(riskAversion, Math.abs(c) / house.nearBelow);
    const listed = holds ? this.near : without(allStates(house.states), this.paying);
    const series = holds ? { ...commonGain(this.moments, riskAversion, c), squares: commonSquares(this.moments, riskAversion, c) } : { gain: 0, slope: 0, squares: 0 };
    let { gain, slope, squares } = series;
    for (const s of listed) {
      const k = house.capital[s] ?? 0;
      const before = house.slope[s] ?? 0;
      const gained = utilityGainFrom(k, before, c, house.preferences);
      gain += gained;
      squares += gained * gained;
      slope += slopeAfter(k, before, c, gained, house.preferences);
    }
    return { gain, slope, squares };
  }
}

function* allStates(states: number): Generator<number> {
  for (let s = 0; s < states; s += 1) yield s;
}

/** Those of rising states that are not among the paying ones. */
function without(all: Iterable<number>, paying: Uint32Array): number[] {
  const rest: number[] = [];
  let at = 0;
  for (const s of all) {
    while (at < paying.length && (paying[at] ?? 0) < s) at += 1;
    if (paying[at] !== s) rest.push(s);
  }
  return rest;
}
