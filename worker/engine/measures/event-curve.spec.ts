import { eventCurve, yearlyMean } from './event-curve';

describe('the curve of an event list', () => {
  it('does not depend on the order of the events, and makes one point of equal losses', () => {
    const curve = eventCurve([0.1, 0.02, 0.3, 0.05], [5, 9, 0, 5]);
    expect(curve.map(({ loss }) => loss)).toEqual([9, 5]);
    expect(curve[0]?.rate).toBe(0.02);
    expect(curve[1]?.rate).toBeCloseTo(0.17, 15);
    expect(curve[1]?.probability).toBeCloseTo(1 - Math.exp(-0.17), 15);
  });

  it('keeps the digits of rare events', () => {
    expect(eventCurve([1e-12], [1])[0]!.probability / 1e-12).toBeCloseTo(1, 11);
  });

  it('of no events, or of events without loss, is empty', () => {
    expect(eventCurve([], [])).toEqual([]);
    expect(eventCurve([0.5], [0])).toEqual([]);
    expect(yearlyMean([0.5, 0.1], [0, 3])).toBeCloseTo(0.3, 15);
  });

  it('refuses lists that do not match and values out of domain, in words', () => {
    expect(() => eventCurve([0.1], [])).toThrow('number of losses is 0; it must be that of rates, 1');
    expect(() => eventCurve([0.1, -1], [1, 1])).toThrow('rate of event 2 is -1; it must be 0 or more');
    expect(() => yearlyMean([0.1], [Number.NaN])).toThrow('loss of event 1 is NaN');
  });
});
