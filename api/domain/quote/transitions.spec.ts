import { QUOTE_STATES } from '../vocabulary';
import { TRANSITIONS } from './transitions';

describe('how a quote moves', () => {
  const reachable = new Set<string>(['draft']);
  for (let round = 0; round < QUOTE_STATES.length; round += 1) {
    for (const { from, to } of Object.values(TRANSITIONS)) {
      if (from.some((state) => reachable.has(state))) for (const state of to) reachable.add(state);
    }
  }

  it('reaches every state from a draft', () => expect([...reachable].sort()).toEqual([...QUOTE_STATES].sort()));

  it('names known states only, and moves to another state than it came from', () => {
    for (const { from, to } of Object.values(TRANSITIONS)) {
      for (const state of [...from, ...to]) expect(QUOTE_STATES).toContain(state);
      expect(to.filter((state) => from.includes(state))).toEqual([]);
    }
  });

  it('ends in bound, declined, not taken up, lapsed, withdrawn and superseded', () => {
    const left = new Set(Object.values(TRANSITIONS).flatMap(({ from }) => from));
    const ends = QUOTE_STATES.filter((state) => !left.has(state));
    expect(ends).toEqual(['declined', 'bound', 'not taken up', 'lapsed', 'withdrawn', 'superseded']);
  });
});
