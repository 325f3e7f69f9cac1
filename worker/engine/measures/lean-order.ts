/** States from the leanest (least capital) to the most plentiful; ties by their number, so that the order is one. */
export function leanOrder(capital: Float64Array): Uint32Array {
  const order = new Uint32Array(capital.length);
  for (let s = 0; s < order.length; s += 1) order[s] = s;
  return order.sort((a, b) => (capital[a] ?? 0) - (capital[b] ?? 0) || a - b);
}
