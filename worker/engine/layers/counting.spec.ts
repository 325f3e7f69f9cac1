import { type InuringCover, type LayerForm } from '../model/layer';
import { countedLoss, inuringRecovery, reachOf } from './counting';

const aggregate = (threshold: number, counts: 'in full' | 'over it', cap: number | null): LayerForm => ({
  kind: 'aggregate',
  threshold,
  counts,
  cap,
});
const event = (first: number, qualifying: number): LayerForm => ({ kind: 'nth event', first, qualifying });

describe('what an occurrence counts for before annual terms (own arithmetic)', () => {
  it.each([
    ['below the attachment', 7, 0],
    ['at the attachment', 10, 0],
    ['within the layer', 14, 4],
    ['at the top', 15, 5],
    ['beyond it', 40, 5],
  ])('of an excess of 5 xs 10: %s', (_where, loss, counted) =>
    expect(countedLoss(loss, { kind: 'excess' }, 5, 10, 0)).toBe(counted),
  );

  it.each([
    ['in full, uncapped', 'in full', null, [0, 0, 3, 4, 9]],
    ['over it, uncapped', 'over it', null, [0, 0, 0, 1, 6]],
    ['in full, capped at 5', 'in full', 5, [0, 0, 3, 4, 5]],
    ['over it, capped at 5', 'over it', 5, [0, 0, 0, 1, 2]],
  ] as const)('of an aggregate excess with threshold 3: %s', (_name, counts, cap, expected) => {
    // Neither the limit nor the attachment of the year's sum touches one occurrence.
    expect(
      [1, 2.999, 3, 4, 9].map((loss) => countedLoss(loss, aggregate(3, counts, cap), 1, 100, 0)),
    ).toEqual(expected);
  });

  it('of an aggregate excess without a threshold is the whole loss, whichever way it counts', () => {
    expect(countedLoss(7, aggregate(0, 'in full', null), 1, 100, 0)).toBe(7);
    expect(countedLoss(7, aggregate(0, 'over it', null), 1, 100, 0)).toBe(7);
  });

  it.each([
    ['the first has not come', 20, 1, 0],
    ['the second itself', 20, 2, 5],
    ['the third', 12, 3, 2],
    ['one below the threshold, however many have come', 7.9, 4, 0],
    ['one at the threshold that does not reach the layer', 8, 4, 0],
  ])('of 5 xs 10 from the second event of 8 or more: %s', (_name, loss, qualified, counted) =>
    expect(countedLoss(loss, event(2, 8), 5, 10, qualified)).toBe(counted),
  );

  it('of an event with a qualifying threshold above the attachment: a loss between the two counts for nothing', () => {
    expect(countedLoss(14, event(1, 15), 5, 10, 0)).toBe(0);
    expect(countedLoss(15, event(1, 15), 5, 10, 1)).toBe(5);
  });
});

describe('what an inuring cover recovers (own arithmetic)', () => {
  const cover = (annualLimit: number): InuringCover => ({ limit: 4, attachment: 6, annualLimit });

  it.each([
    [6, Infinity, 0, 0],
    [9, Infinity, 0, 3],
    [50, Infinity, 1000, 4],
    [50, 5, 0, 4],
    [50, 5, 4, 1],
    [50, 5, 5, 0],
    [6.5, 5, 4, 0.5],
  ])('of a loss of %p with annual limit %p, having paid %p', (loss, annualLimit, paid, recovered) =>
    expect(inuringRecovery(loss, cover(annualLimit), paid)).toBe(recovered),
  );
});

describe('the least ground-up loss that can count', () => {
  const HAIR = 1e-12;
  it.each([
    ['an excess', { kind: 'excess' } as const, 10, 1, false, 10],
    ['an excess behind a quota share', { kind: 'excess' } as const, 10, 0.4, false, 25],
    ['an aggregate excess', aggregate(3, 'in full', null), 10, 0.5, false, 6],
    ['an n-th event, below its attachment too: it must be counted', event(2, 8), 10, 1, false, 8],
    ['anything behind inuring covers, whose limits small losses use up', event(2, 8), 10, 1, true, 0],
  ])('%s', (_name, form, attachment, kept, inured, least) => {
    const reach = reachOf(form, attachment, kept, inured);
    expect(reach).toBeLessThanOrEqual(least);
    expect(reach).toBeGreaterThanOrEqual(least * (1 - 2 * HAIR));
  });

  it('never leaves out a loss that would count, whatever rounding does', () => {
    for (let i = 1; i < 2000; i += 1) {
      const [threshold, kept] = [0.1 * i, (i % 97) / 97 + 0.001];
      const form = aggregate(threshold, 'in full', null);
      // The least double whose part after the quota share reaches the threshold.
      let loss = threshold / kept;
      while (loss * kept < threshold) loss *= 1 + 2 ** -52;
      expect({ threshold, kept, counts: countedLoss(loss * kept, form, 1, 0, 0) > 0 }).toMatchObject({
        counts: true,
      });
      expect({ threshold, kept, within: reachOf(form, 0, kept, false) <= loss }).toMatchObject({
        within: true,
      });
    }
  });
});
