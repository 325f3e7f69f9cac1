import { ln } from '../math/ln';
import { normalQuantile } from '../math/normal';
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
 * Occurrences of a block, one entry each, ordered by state, then day, then event and draw.
 * `ordinal` is the draw of its event in this block: with event and block it names the occurrence for ever.
 */
export interface Occurrences {
  readonly count: number;
  readonly state: Uint16Array;
  readonly event: Uint32Array;
  readonly ordinal: Uint32Array;
  /** Days from inception, 0 to 365. */
  readonly day: Float64Array;
  /** Common severity score, standard normal. */
  readonly score: Float64Array;
}

class Growing {
  capacity = 65_536;
  count = 0;
  state = new Uint16Array(this.capacity);
  event = new Uint32Array(this.capacity);
  ordinal = new Uint32Array(this.capacity);
  day = new Float64Array(this.capacity);
  score = new Float64Array(this.capacity);

  grow(): void {
    const larger = <A extends Uint16Array | Uint32Array | Float64Array>(from: A, to: A): A => {
      to.set(from);
      return to;
    };
    this.capacity *= 2;
    this.state = larger(this.state, new Uint16Array(this.capacity));
    this.event = larger(this.event, new Uint32Array(this.capacity));
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

/**
 * Draws one event's occurrences in a block. They are the points of a Poisson process of unit intensity over
 * states × height that lie below the event's rate, taken in order of height: raising the rate leaves every point where it
 * was and adds those between the two rates, and nothing of another event is touched. In a group the rate is multiplied by
 * the state's gamma factor. One call of the generator a point: height, state and day, severity score.
 */
function drawEvent(
  out: Growing,
  words: Uint32Array,
  event: { readonly number: number; readonly rate: number; readonly seasonDay: number; readonly key0: number; readonly key1: number },
  place: { readonly block: number; readonly states: number; readonly inceptionDay: number },
  factors: Factors | null,
): void {
  const ceiling = factors === null ? event.rate : event.rate * factors.largest;
  let height = 0;
  for (let ordinal = 0; ; ordinal += 1) {
    philox(words, ordinal, place.block, PURPOSE.occurrence, 0, event.key0, event.key1);
    height -= ln(uniform32(words[0] ?? 0)) / BLOCK_STATES;
    if (height >= ceiling) return;
    const second = words[1] ?? 0;
    const state = second & (BLOCK_STATES - 1);
    if (state >= place.states) continue;
    if (factors !== null && height >= event.rate * (factors.byState[state] ?? 0)) continue;
    if (out.count === out.capacity) out.grow();
    const calendarDay = event.seasonDay === event.seasonDay ? event.seasonDay - 1 : ((second >>> 14) / DAY_STEPS) * DAYS;
    const sinceInception = calendarDay - (place.inceptionDay - 1);
    out.state[out.count] = state;
    out.event[out.count] = event.number;
    out.ordinal[out.count] = ordinal;
    out.day[out.count] = sinceInception < 0 ? sinceInception + DAYS : sinceInception;
    out.score[out.count] = normalQuantile(uniform52(words[2] ?? 0, words[3] ?? 0));
    out.count += 1;
  }
}

function sorted(drawn: Growing, states: number): Occurrences {
  const { count } = drawn;
  const starts = new Uint32Array(states + 1);
  for (let i = 0; i < count; i += 1) {
    const state = drawn.state[i] ?? 0;
    starts[state + 1] = (starts[state + 1] ?? 0) + 1;
  }
  for (let s = 0; s < states; s += 1) starts[s + 1] = (starts[s + 1] ?? 0) + (starts[s] ?? 0);
  const order = new Uint32Array(count);
  const fill = starts.slice();
  for (let i = 0; i < count; i += 1) {
    const state = drawn.state[i] ?? 0;
    const first = starts[state] ?? 0;
    let at = fill[state] ?? 0;
    fill[state] = at + 1;
    // Drawn in order of event and ordinal, so ties of the day keep that order.
    const day = drawn.day[i] ?? 0;
    while (at > first && (drawn.day[order[at - 1] ?? 0] ?? 0) > day) {
      order[at] = order[at - 1] ?? 0;
      at -= 1;
    }
    order[at] = i;
  }
  const pick = <A extends Uint16Array | Uint32Array | Float64Array>(from: A, to: A): A => {
    for (let i = 0; i < count; i += 1) to[i] = from[order[i] ?? 0] ?? 0;
    return to;
  };
  return {
    count,
    state: pick(drawn.state, new Uint16Array(count)),
    event: pick(drawn.event, new Uint32Array(count)),
    ordinal: pick(drawn.ordinal, new Uint32Array(count)),
    day: pick(drawn.day, new Float64Array(count)),
    score: pick(drawn.score, new Float64Array(count)),
  };
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
 * All occurrences of one block.
 * @param states in the block: 16,384 but for the last
 * @param inceptionDay calendar day of inception, 1 to 365
 */
export function drawOccurrences(
  catalogues: readonly KeyedCatalogue[],
  block: number,
  states: number,
  inceptionDay: number,
): Occurrences {
  const words = new Uint32Array(4);
  const drawn = new Growing();
  const place = { block, states, inceptionDay };
  for (const { catalogue, keys, firstEvent, rate } of catalogues) {
    const factors = groupFactors(keys, block, states, words);
    for (let i = 0; i < catalogue.eventNames.length; i += 1) {
      const group = catalogue.groupIndex[i] ?? -1;
      drawEvent(
        drawn,
        words,
        {
          number: firstEvent + i,
          rate: rate[i] ?? 0,
          seasonDay: catalogue.seasonDay[i] ?? Number.NaN,
          key0: keys.event0[i] ?? 0,
          key1: keys.event1[i] ?? 0,
        },
        place,
        group < 0 ? null : (factors[group] ?? null),
      );
    }
  }
  return sorted(drawn, states);
}
