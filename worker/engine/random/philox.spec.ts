import { philox, uniform32, uniform52 } from './philox';

/** Known-answer vectors published with the generator's reference code (from memory): counter, key, answer. */
const VECTORS: readonly (readonly [readonly number[], readonly number[], readonly number[]])[] = [
  [[0, 0, 0, 0], [0, 0], [0x6627e8d5, 0xe169c58d, 0xbc57ac4c, 0x9b00dbd8]],
  [
    [0xffffffff, 0xffffffff, 0xffffffff, 0xffffffff],
    [0xffffffff, 0xffffffff],
    [0x408f276d, 0x41c83b0e, 0xa20bc7c6, 0x6d5451fd],
  ],
  [
    [0x243f6a88, 0x85a308d3, 0x13198a2e, 0x03707344],
    [0xa4093822, 0x299f31d0],
    [0xd16cfe09, 0x94fdcceb, 0x5001e420, 0x24126ea1],
  ],
];

describe('Philox-4x32-10', () => {
  it.each(VECTORS)('answers its published vectors: %p %p', ([c0, c1, c2, c3], [k0, k1], answer) => {
    const out = new Uint32Array(4);
    philox(out, c0 ?? 0, c1 ?? 0, c2 ?? 0, c3 ?? 0, k0 ?? 0, k1 ?? 0);
    expect([...out]).toEqual(answer);
  });

  it('makes uniform numbers strictly inside 0 and 1', () => {
    expect(uniform52(0, 0)).toBeGreaterThan(0);
    expect(uniform52(0xffffffff, 0xffffffff)).toBeLessThan(1);
    expect(uniform32(0)).toBeGreaterThan(0);
    expect(uniform32(0xffffffff)).toBeLessThan(1);
  });
});
