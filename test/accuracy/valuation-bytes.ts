import type { Valuation } from '../../worker/engine';

/** Everything that a valuation says, with its series as the hexadecimal digits of their bytes. Safe in a browser. */
export function valuationBytes({ series, ...told }: Valuation): Record<string, string> {
  const hex = (array: Float64Array | Uint32Array): string => Array.from(new Uint8Array(array.buffer, array.byteOffset, array.byteLength), (byte) => byte.toString(16).padStart(2, '0')).join('');
  return {
    told: JSON.stringify(told),
    capital: hex(series.capital),
    paying: series.paying.map(({ state, payoff, reinstatement }) => [state, payoff, reinstatement].map(hex).join()).join(),
  };
}
