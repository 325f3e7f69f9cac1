import type { LayerTerms } from '../model/layer';
import { inventedLayer } from '../testing/invented';
import { checkLayer } from '../model/check';
import { LayerYear } from './layer-year';

/** Loss and day since inception. */
type Occurrence = readonly [loss: number, day: number];

/** Takes a year of occurrences, in order of day, through a layer; only those within its reach, as the kernel does. */
function play(terms: LayerTerms, occurrences: readonly Occurrence[], year = new LayerYear(terms)) {
  checkLayer(terms);
  year.begin();
  const nets: number[] = [];
  const counted = occurrences.map(([loss, day]) => {
    const own = loss >= year.reach ? year.take(loss, day) : 0;
    nets.push(loss >= year.reach ? year.net : 0);
    return own;
  });
  return { counted, nets, summed: year.summed, payoff: year.payoff, reinstatement: year.reinstatement };
}

/** The same losses a month apart. */
const monthly = (...losses: readonly number[]): Occurrence[] => losses.map((loss, i) => [loss, 30 * i]);
const layer = (limit: number, attachment: number, over: Partial<LayerTerms> = {}): LayerTerms =>
  inventedLayer('tested', limit, attachment, over);
const near = (x: number): number => expect.closeTo(x, 12) as number;

describe('an excess layer through a year (own arithmetic)', () => {
  it('counts each occurrence over the attachment up to the limit, and charges pro rata as to amount', () => {
    // 4 + 5 + 2 = 11; two limits are covered: 10. The first limit is reinstated at 100%, the second is not.
    const year = play(layer(5, 10), monthly(14, 30, 9, 12));
    expect(year).toMatchObject({ counted: [4, 5, 0, 2], summed: 11, payoff: 10, reinstatement: 1 });
    // 4 of 5 used, 4 of 5 reinstated.
    expect(play(layer(5, 10), monthly(14))).toMatchObject({ payoff: 4, reinstatement: near(0.8) });
  });

  it('without reinstatements pays its limit once', () => {
    expect(play(layer(5, 10, { reinstatements: [] }), monthly(14, 30))).toMatchObject({
      payoff: 5,
      reinstatement: 0,
    });
  });

  it.each([
    ['within the first limit', [13], 3, 0.5 * 0.6],
    ['within the second', [15, 12], 7, 0.5 + 1.2 * 0.4],
    ['within the third', [15, 15, 12], 12, 0.5 + 1.2 + 2 * 0.4],
    ['within the fourth, which is not reinstated', [15, 15, 15, 14], 19, 3.7],
    ['beyond all', [15, 15, 15, 15, 15], 20, 3.7],
  ])('reinstates each tranche at its own price, 50%, 120% and 200%: %s', (_where, losses, payoff, share) =>
    expect(play(layer(5, 10, { reinstatements: [0.5, 1.2, 2] }), monthly(...losses))).toMatchObject({
      payoff,
      reinstatement: near(share),
    }),
  );

  it('with one reinstatement free and one paid charges for the second limit only', () => {
    const terms = layer(5, 10, { reinstatements: [0, 1] });
    expect(play(terms, monthly(15))).toMatchObject({ payoff: 5, reinstatement: 0 });
    expect(play(terms, monthly(15, 13))).toMatchObject({ payoff: 8, reinstatement: near(0.6) });
  });

  it.each([
    ['free', 0, 0],
    ['at 100%', 1, 20.4 / 5],
    ['at 40%', 0.4, (0.4 * 20.4) / 5],
  ])('with unlimited reinstatements pays every limit: %s', (_name, price, share) =>
    expect(
      play(
        layer(5, 10, { reinstatements: [], unlimitedReinstatementsAt: price }),
        monthly(15, 15, 15, 15, 10.4),
      ),
    ).toMatchObject({ payoff: near(20.4), reinstatement: near(share) }),
  );

  it('takes the annual deductible off the year’s sum before the cover', () => {
    // Sum 5 + 5 + 2 = 12, less 6.
    const terms = layer(5, 10, { annualDeductible: 6 });
    expect(play(terms, monthly(15, 15, 12))).toMatchObject({ summed: 12, payoff: 6, reinstatement: 1 });
    expect(play(terms, monthly(15))).toMatchObject({ summed: 5, payoff: 0, reinstatement: 0 });
    expect(play(terms, monthly(15, 12.5))).toMatchObject({ payoff: 1.5, reinstatement: near(0.3) });
  });

  it('pays no more than its annual limit, and reinstates no more than it pays', () => {
    const terms = layer(5, 10, { reinstatements: [1, 1], annualLimit: 7 });
    expect(play(terms, monthly(15, 15, 15))).toMatchObject({ payoff: 7, reinstatement: near(1.4) });
    const unlimited = layer(5, 10, { reinstatements: [], unlimitedReinstatementsAt: 0, annualLimit: 12 });
    expect(play(unlimited, monthly(15, 15, 15))).toMatchObject({ payoff: 12, reinstatement: 0 });
    // One above the cover changes nothing.
    expect(play(layer(5, 10, { annualLimit: 99 }), monthly(15, 15, 15)).payoff).toBe(10);
  });

  it('takes deductible and annual limit in this order', () => {
    const terms = layer(5, 10, { reinstatements: [1, 1], annualDeductible: 4, annualLimit: 8 });
    expect(play(terms, monthly(15, 15))).toMatchObject({ payoff: 6 });
    expect(play(terms, monthly(15, 15, 15))).toMatchObject({ payoff: 8 });
  });

  it('begins every year anew', () => {
    const terms = layer(5, 10, {
      form: { kind: 'nth event', first: 2, qualifying: 10 },
      inuringCovers: [{ limit: 2, attachment: 0, annualLimit: 3 }],
      reinstatedProRataTime: true,
    });
    const year = new LayerYear(terms);
    const once = play(terms, monthly(20, 20, 13), year);
    expect(play(terms, monthly(20, 20, 13), year)).toEqual(once);
    expect(play(terms, [], year)).toMatchObject({ summed: 0, payoff: 0, reinstatement: 0 });
  });
});

describe('reinstatement pro rata as to time (own arithmetic)', () => {
  const timed = (over: Partial<LayerTerms> = {}): LayerTerms =>
    layer(5, 10, { reinstatedProRataTime: true, ...over });

  it('multiplies each amount by the days to run over 365', () => {
    // 4 of 5 reinstated on day 73: four fifths of the year to run.
    expect(play(timed(), [[14, 73]]).reinstatement).toBeCloseTo(0.8 * 0.8, 12);
    // Then the last of the first limit on day 292: a fifth to run; the rest is of the second limit.
    expect(
      play(timed(), [
        [14, 73],
        [15, 292],
      ]).reinstatement,
    ).toBeCloseTo(0.8 * 0.8 + 0.2 * 0.2, 12);
  });

  it('is the same as 100% as to time on the day of inception', () => {
    expect(play(timed({ reinstatements: [0.5, 1.2] }), [[30, 0]]).reinstatement).toBeCloseTo(0.5, 12);
  });

  it('prices a loss that crosses two tranches by both, on its own day', () => {
    const terms = timed({ reinstatements: [0.5, 1.2] });
    const year = play(terms, [
      [13, 0],
      [15, 146],
    ]);
    // 3 on day 0 at 50%; then 2 at 50% and 3 at 120%, with three fifths of the year to run.
    expect(year.reinstatement).toBeCloseTo(0.5 * 0.6 + (0.5 * 0.4 + 1.2 * 0.6) * 0.6, 12);
    expect(year.payoff).toBe(8);
  });

  it('counts the days of what is paid, not of what the deductible takes', () => {
    const year = play(timed({ annualDeductible: 5 }), [
      [15, 0],
      [13, 146],
    ]);
    expect(year.reinstatement).toBeCloseTo(0.6 * 0.6, 12);
  });

  it('serves unlimited reinstatements too', () => {
    const year = play(timed({ reinstatements: [], unlimitedReinstatementsAt: 0.4 }), [
      [15, 73],
      [12, 146],
    ]);
    expect(year.reinstatement).toBeCloseTo(0.4 * (0.8 + 0.4 * 0.6), 12);
  });

  it('is never more than 100% as to time', () => {
    const losses: Occurrence[] = [
      [13, 5.5],
      [30, 100],
      [12, 364.9],
    ];
    const [whole, part] = [play(layer(5, 10), losses), play(timed(), losses)];
    expect(part.payoff).toBe(whole.payoff);
    expect(part.reinstatement).toBeLessThan(whole.reinstatement);
  });
});

describe('an aggregate excess through a year (own arithmetic)', () => {
  const aggregate = (
    counts: 'in full' | 'over it',
    cap: number | null,
    over: Partial<LayerTerms> = {},
  ): LayerTerms =>
    layer(10, 8, { form: { kind: 'aggregate', threshold: 3, counts, cap }, reinstatements: [], ...over });

  it.each([
    ['in full from its threshold (franchise)', 'in full', null, [0, 3, 4, 20], 27, 10],
    ['over its threshold (deductible)', 'over it', null, [0, 0, 1, 17], 18, 10],
    ['in full, capped', 'in full', 6, [0, 3, 4, 6], 13, 5],
    ['over its threshold, capped', 'over it', 6, [0, 0, 1, 3], 4, 0],
  ] as const)('counts each occurrence %s', (_name, counts, cap, counted, summed, payoff) =>
    expect(play(aggregate(counts, cap), monthly(2, 3, 4, 20))).toMatchObject({
      counted,
      summed,
      payoff,
      reinstatement: 0,
    }),
  );

  it('adds an annual deductible to its attachment, and bounds its payoff by an annual limit', () => {
    expect(play(aggregate('in full', 6, { annualDeductible: 2 }), monthly(3, 4, 20)).payoff).toBe(3);
    expect(play(aggregate('in full', null, { annualLimit: 7 }), monthly(3, 4, 20)).payoff).toBe(7);
  });

  it('counts what a quota share and inuring covers leave', () => {
    const terms = aggregate('in full', null, {
      quotaShareKept: 0.5,
      inuringCovers: [{ limit: 2, attachment: 4, annualLimit: 3 }],
    });
    // Halves: 2, 3, 7, 7; covers take 0, 0, 2 and the 1 that is left.
    expect(play(terms, monthly(4, 6, 14, 14))).toMatchObject({
      nets: [2, 3, 5, 6],
      counted: [0, 3, 5, 6],
      payoff: 6,
    });
  });
});

describe('an n-th event layer through a year (own arithmetic)', () => {
  const event = (first: number, qualifying: number, over: Partial<LayerTerms> = {}): LayerTerms =>
    layer(5, 10, { form: { kind: 'nth event', first, qualifying }, ...over });

  it('counts from the n-th occurrence that qualifies', () => {
    expect(play(event(2, 10), monthly(14, 9, 13, 30)).counted).toEqual([0, 0, 3, 5]);
    expect(play(event(3, 10), monthly(14, 9, 13, 30)).counted).toEqual([0, 0, 0, 5]);
    expect(play(event(4, 10), monthly(14, 9, 13, 30)).payoff).toBe(0);
  });

  it('lets an occurrence qualify that does not reach the attachment', () => {
    // 7 qualifies and recovers nothing; 13 is the second that qualifies.
    expect(play(event(2, 6), monthly(7, 5.9, 13))).toMatchObject({ counted: [0, 0, 3], payoff: 3 });
  });

  it('lets an occurrence at its threshold qualify, and none that reaches the attachment but not a higher threshold', () => {
    expect(play(event(2, 12), monthly(12, 11.9, 12)).counted).toEqual([0, 0, 2]);
  });

  it('as a first event is an excess', () => {
    const losses = monthly(14, 9, 13, 30);
    expect(play(event(1, 10), losses).counted).toEqual(play(layer(5, 10), losses).counted);
  });

  it('has annual terms and reinstatements as an excess has', () => {
    const terms = event(2, 10, { annualDeductible: 1, reinstatements: [1], annualLimit: 9 });
    expect(play(terms, monthly(15, 15, 15, 15))).toMatchObject({ summed: 15, payoff: 9, reinstatement: 1 });
    const timed = event(2, 10, { reinstatedProRataTime: true });
    expect(
      play(timed, [
        [15, 10],
        [12, 73],
      ]).reinstatement,
    ).toBeCloseTo(0.4 * 0.8, 12);
  });

  it('qualifies by what a quota share and inuring covers leave', () => {
    expect(play(event(2, 10, { quotaShareKept: 0.5 }), monthly(19, 20, 28)).counted).toEqual([0, 0, 4]);
    const inured = event(2, 10, { inuringCovers: [{ limit: 5, attachment: 5, annualLimit: 5 }] });
    // 14 less 5 does not qualify; the cover is used up, and 14 is the first that does.
    expect(play(inured, monthly(14, 14, 13))).toMatchObject({ nets: [9, 14, 13], counted: [0, 0, 3] });
  });
});

describe('covers that inure to a layer (own arithmetic)', () => {
  it('a quota share leaves its share of every loss', () => {
    expect(play(layer(5, 10, { quotaShareKept: 0.6 }), monthly(20, 16, 40))).toMatchObject({
      nets: [12, 0, 24],
      counted: [2, 0, 5],
    });
  });

  it('an excess cover takes its recovery off each loss, until its annual limit is used up in order of day', () => {
    const terms = layer(10, 10, { inuringCovers: [{ limit: 8, attachment: 5, annualLimit: 11 }] });
    // Recoveries 8, then the 3 that are left, then none.
    expect(play(terms, monthly(22, 18, 15))).toMatchObject({ nets: [14, 15, 15], counted: [4, 5, 5] });
    // In another order the same losses leave another payoff.
    expect(play(terms, monthly(15, 18, 22))).toMatchObject({ nets: [7, 15, 22], counted: [0, 5, 10] });
  });

  it('a small loss that the layer never sees uses up the cover too', () => {
    const terms = layer(10, 10, { inuringCovers: [{ limit: 8, attachment: 5, annualLimit: 8 }] });
    expect(play(terms, monthly(9, 22))).toMatchObject({ nets: [5, 18], counted: [0, 8] });
  });

  it('two covers side by side both see the whole loss', () => {
    const covers = [
      { limit: 4, attachment: 2, annualLimit: Infinity },
      { limit: 3, attachment: 6, annualLimit: 3 },
    ];
    const terms = layer(10, 5, { inuringCovers: covers });
    // 20 less 4 and 3; then less 4 and nothing.
    expect(play(terms, monthly(20, 20)).nets).toEqual([13, 16]);
  });

  it('covers that would take more than the loss leave nothing of it', () => {
    const twice = { limit: 10, attachment: 0, annualLimit: Infinity };
    expect(play(layer(10, 0, { inuringCovers: [twice, twice] }), monthly(8))).toMatchObject({
      nets: [0],
      counted: [0],
    });
  });

  it('a quota share comes before excess covers', () => {
    const terms = layer(10, 5, {
      quotaShareKept: 0.5,
      inuringCovers: [{ limit: 4, attachment: 6, annualLimit: Infinity }],
    });
    expect(play(terms, monthly(20)).nets).toEqual([6]);
  });
});

describe('co-participation', () => {
  it('bounds the line and leaves the payoff for 100% as it is', () => {
    const terms = layer(5, 10, { coParticipation: 0.1, line: 0.9 });
    expect(play(terms, monthly(14)).payoff).toBe(4);
    // Not refused for the last bit of a difference.
    expect(() => checkLayer({ ...terms, coParticipation: 0.3, line: 0.7 })).not.toThrow();
    expect(() => checkLayer({ ...terms, line: 0.91 })).toThrow(
      'Layer tested: the line is 0.91; it must be above 0 and 0.9 at most.',
    );
  });
});
