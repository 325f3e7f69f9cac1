import { createHash } from 'node:crypto';
import { runResult, type RunResult } from '../../../api/contract/runs';
import type { ProgrammeTermsRecord } from '../../../api/domain/programme/programme';
import { canonicalJson } from '../../../api/domain/run/canonical';
import type { Valuation } from '../../engine';
import type { BasisTerms } from '../../../api/contract/house';

/** The valuation as the contract shows it; parsed, so that nothing else is ever stored. */
export function resultOf(valuation: Valuation, terms: ProgrammeTermsRecord, basis: BasisTerms): RunResult {
  const { programme, house, selfCheck } = valuation;
  const tail = (points: typeof house.tailBefore) => points.map(({ years, value, valueError }) => ({ years, loss: value ?? 0, lossError: valueError ?? 0 }));
  const said = (value: number | null | undefined, error: number | null | undefined) => (value === null || value === undefined ? null : { value, standardError: error ?? 0 });
  const { occurrence, aggregate, ...whole } = programme;
  return runResult.parse({
    currency: terms.currency,
    states: valuation.states,
    layers: valuation.layers.map((layer) => ({
      ...layer,
      name: terms.layers.find(({ key }) => key === layer.key)?.name ?? layer.key,
      expectedLossShareOfLimit: layer.expectedLoss.value / Number(terms.layers.find(({ key }) => key === layer.key)?.limit ?? 1),
    })),
    programme: {
      ...whole,
      expectedLossShareOfLimit: whole.expectedLoss.value / terms.layers.reduce((sum, { limit }) => sum + Number(limit), 0),
      exceedance: occurrence.map((point, i) => ({
        years: point.years,
        occurrence: said(point.value, point.valueError),
        occurrenceTail: said(point.tailValue, point.tailValueError),
        aggregate: said(aggregate[i]?.value, aggregate[i]?.valueError),
        aggregateTail: said(aggregate[i]?.tailValue, aggregate[i]?.tailValueError),
      })),
    },
    lens: valuation.lens,
    house: {
      currency: basis.currency,
      capital: basis.capital,
      sureValue: house.sureValue,
      risklessRate: house.risklessRate,
      largestSharpeRatio: house.largestSharpeRatio,
      floorShare: house.floorShare,
      effectiveStates: house.effectiveStates,
      tailBefore: tail(house.tailBefore),
      tailAfter: tail(house.tailAfter),
    },
    selfCheck: { largest: selfCheck.largest, flagged: selfCheck.flagged, groundUp: selfCheck.groundUp },
  });
}

/** Hash over a result and its yearly payoffs: the same inputs give the same, to the last byte. */
export function resultHash(result: RunResult, series: readonly { readonly values: Float64Array }[]): string {
  const hash = createHash('sha256').update(canonicalJson(result));
  for (const { values } of series) hash.update(Buffer.from(values.buffer, values.byteOffset, values.byteLength));
  return hash.digest('hex');
}
