import { ln } from '../math/ln';
import { normalQuantiles } from '../math/normal';
import { BLOCK_STATES, type Catalogue } from '../model/inputs';
import { gammaFactor } from './gamma-factor';
import { PURPOSE, streamKey } from './keys';
import { philox, uniform32, uniform52 } from './philox';

const DAYS = 365;
const DAY_STEPS = 262_144;

/** Random keys of a catalogue's events and groups; made once a run. */
export interface CatalogueKeys {
  readonly event0: Uint32Array;
  readonly event1: Uint32Array;
  readonly groups: readonly { readonly key0: number; readonly key1: number; readonly shape: number }[];
}

export function catalogueKeys(catalogue: Catalogue, seed: string): CatalogueKeys {
  const n = catalogue.eventNames.length;
  const event0 = new Uint32Array(n);
  const event1 = new Uint32Array(n);
  catalogue.eventNames.forEach((name, i) => {
    const key = streamKey(seed, catalogue.lineage, name);
    event0[i] = key.key0;
    event1[i] = key.key1;
  });
  const rates = new Float64Array(catalogue.groups.length);
  for (let i = 0; i < n; i += 1) {
    const group = catalogue.groupIndex[i] ?? -1;
    if (group >= 0) rates[group] = (rates[group] ?? 0) + (catalogue.ratePerYear[i] ?? 0);
  }
  const groups = catalogue.groups.map((group, g) => ({
    ...streamKey(seed, catalogue.lineage, `group\u0000${group.name}`),
    shape: (rates[g] ?? 0) / (group.varianceToMean - 1),
  }));
  return { event0, event1, groups };
}

/**
 * Occurrences of a block in the order of their draw: event by event, and of an event in order of height.
 * The place of an occurrence within its event is its draw: with event and block it names the occurrence for ever.
 */
export class Occurrences {
  private capacity = 65_536;
  count = 0;
  /** Place of the first occurrence of each event, counted through all catalogues; one more entry ends the last. */
  readonly eventStart: Uint32Array;
  /** State within the block. */
  state = new Uint16Array(this.capacity);
  /** Number of the draw of its event in this block. */
  ordinal = new Uint32Array(this.capacity);
  /** Days from inception, 0 to 365. */
  day = new Float64Array(this.capacity);
  /** Common severity score, standard normal. */
  score = new Float64Array(this.capacity);

  constructor(events: number) {
    this.eventStart = new Uint32Array(events + 1);
  }

  /** Makes room for one more. */
  reserve(): void {
    if (this.count < this.capacity) return;
    const larger = <A extends Uint16Array | Uint32Array | Float64Array>(from: A, to: A): A => {
      to.set(from);
      return to;
    };
    this.capacity *= 2;
    this.state = larger(this.state, new Uint16Array(this.capacity));
    this.ordinal = larger(this.ordinal, new Uint32Array(this.capacity));
    this.day = larger(this.day, new Float64Array(this.capacity));
    this.score = larger(this.score, new Float64Array(this.capacity));
  }
}

interface Factors {
  readonly byState: Float64Array;
  readonly largest: number;
}

function groupFactors(keys: CatalogueKeys, block: number, states: number, words: Uint32Array): readonly Factors[] {
  return keys.groups.map(({ key0, key1, shape }) => {
    const byState = new Float64Array(BLOCK_STATES);
    let largest = 0;
    for (let s = 0; s < states; s += 1) {
      const factor = gammaFactor(words, shape, block * BLOCK_STATES + s, key0, key1);
      byState[s] = factor;
      if (factor > largest) largest = factor;
    }
    return { byState, largest };
  });
}

/** Where and when a block's occurrences fall. */
interface Place {
  readonly block: number;
  readonly states: number;
  readonly inceptionDay: number;
}

/**
 * Draws one event's occurrences in a block. They are the points of a Poisson process of unit intensity over
 * states × height that lie below the event's rate, taken in order of height: raising the rate leaves every point where it
 * was and adds those between the two rates, and nothing of another event is touched. In a group the rate is multiplied by
 * the state's gamma factor. One call of the generator a point: height, state and day, severity score.
 */
function drawEvent(out: Occurrences, words: Uint32Array, rate: number, seasonDay: number, key0: number, key1: number, place: Place, factors: Factors | null): void {
  const ceiling = factors === null ? rate : rate * factors.largest;
  const inception = place.inceptionDay - 1;
  const { block, states } = place;
  let height = 0;
  for (let ordinal = 0; ; ordinal += 1) {
    philox(words, ordinal, block, PURPOSE.occurrence, 0, key0, key1);
    height -= ln(uniform32(words[0] ?? 0)) / BLOCK_STATES;
    if (height >= ceiling) return;
    const second = words[1] ?? 0;
    const state = second & (BLOCK_STATES - 1);
    if (state >= states) continue;
    if (factors !== null && height >= rate * (factors.byState[state] ?? 0)) continue;
    out.reserve();
    const at = out.count;
    const calendarDay = seasonDay === seasonDay ? seasonDay - 1 : ((second >>> 14) / DAY_STEPS) * DAYS;
    const sinceInception = calendarDay - inception;
    out.state[at] = state;
    out.ordinal[at] = ordinal;
    out.day[at] = sinceInception < 0 ? sinceInception + DAYS : sinceInception;
    out.score[at] = uniform52(words[2] ?? 0, words[3] ?? 0);
    out.count = at + 1;
  }
}

export interface KeyedCatalogue {
  readonly catalogue: Catalogue;
  readonly keys: CatalogueKeys;
  /** Number of its first event, counted through all catalogues. */
  readonly firstEvent: number;
  /** Rate of each event with its factor: what is drawn. The shape of a group stays that of the catalogue's own rates. */
  readonly rate: Float64Array;
}

/**
 * Draws all occurrences of one block.
 * @param out taken over: emptied and filled
 * @param states in the block: 16,384 but for the last
 * @param inceptionDay calendar day of inception, 1 to 365
 */
export function drawOccurrences(out: Occurrences, catalogues: readonly KeyedCatalogue[], block: number, states: number, inceptionDay: number): void {
  const words = new Uint32Array(4);
  const place = { block, states, inceptionDay };
  out.count = 0;
  for (const { catalogue, keys, firstEvent, rate } of catalogues) {
    const factors = groupFactors(keys, block, states, words);
    const { groupIndex, seasonDay } = catalogue;
    for (let i = 0; i < rate.length; i += 1) {
      out.eventStart[firstEvent + i] = out.count;
      const group = groupIndex[i] ?? -1;
      drawEvent(out, words, rate[i] ?? 0, seasonDay[i] ?? Number.NaN, keys.event0[i] ?? 0, keys.event1[i] ?? 0, place, group < 0 ? null : (factors[group] ?? null));
    }
  }
  out.eventStart[out.eventStart.length - 1] = out.count;
  normalQuantiles(out.score, out.count);
}
