import * as z from 'zod';

const estimate = z.object({ value: z.number(), standardError: z.number() });
const tailPoint = z.object({ years: z.number(), value: z.number().nullable(), tailValue: z.number().nullable() });

const perLayer = z.array(
  z.object({
    expectedLoss: estimate,
    marginalPremium: estimate,
    walkAwayPremium: estimate,
    technicalPremium: z.number(),
    programmeWalkAwayPart: z.number(),
  }),
);

/** What one process of the engine measured. */
export const ours = z.object({
  cold: z.number(),
  again: z.number(),
  phases: z.record(z.string(), z.number()),
  peakMb: z.number(),
  results: z.object({ perLayer, programme: z.object({ walkAwayPremium: estimate }), aggregate: z.array(tailPoint), occurrence: z.array(tailPoint) }),
});
export const oursOnThreads = ours.pick({ cold: true, peakMb: true, results: true });
export const oursExported = ours.pick({ results: true });
export const ourKernel = z.object({ median: z.number(), payoffs: z.number(), reinstatements: z.number() });

/** What a comparator printed. */
export const theirs = z.object({
  timings: z.object({ cold: z.number(), again: z.number(), phases: z.record(z.string(), z.number()) }),
  peakRssMb: z.number(),
  versions: z.object({ python: z.string(), numpy: z.string(), scipy: z.string() }),
  results: z.object({
    perLayer,
    programme: z.object({ walkAwayPremium: estimate.or(z.number()) }),
    exceedance: z.object({ aggregate: z.array(tailPoint), occurrence: z.array(tailPoint) }),
  }),
});
export type Ours = z.infer<typeof ours>;
export type Theirs = z.infer<typeof theirs>;

/** Largest relative distance between two results that priced the same occurrences. */
export function largestDifference(a: Ours['results'], b: Theirs['results']): number {
  const pairs = a.perLayer.flatMap((layer, l) => {
    const other = b.perLayer[l];
    if (other === undefined) throw new Error('a layer is missing');
    return [
      [layer.expectedLoss.value, other.expectedLoss.value],
      [layer.marginalPremium.value, other.marginalPremium.value],
      [layer.walkAwayPremium.value, other.walkAwayPremium.value],
      [layer.technicalPremium, other.technicalPremium],
      [layer.programmeWalkAwayPart, other.programmeWalkAwayPart],
    ] as const;
  });
  const tails = (['aggregate', 'occurrence'] as const).flatMap((curve) =>
    a[curve].flatMap((point, p) => {
      const other = b.exceedance[curve][p];
      return [
        [point.value ?? 0, other?.value ?? 0],
        [point.tailValue ?? 0, other?.tailValue ?? 0],
      ] as const;
    }),
  );
  return Math.max(...[...pairs, ...tails].map(([x, y]) => (x === y ? 0 : Math.abs(x - y) / Math.max(Math.abs(x), Math.abs(y)))));
}

/** Largest distance, in standard errors of the difference, between two results that drew each its own. */
export function largestErrors(a: Ours['results'], b: Theirs['results']): number {
  return Math.max(
    ...a.perLayer.flatMap((layer, l) => {
      const other = b.perLayer[l];
      if (other === undefined) throw new Error('a layer is missing');
      return (['expectedLoss', 'marginalPremium', 'walkAwayPremium'] as const).map((figure) => {
        const spread = Math.sqrt(layer[figure].standardError ** 2 + other[figure].standardError ** 2);
        return Math.abs(layer[figure].value - other[figure].value) / spread;
      });
    }),
  );
}
