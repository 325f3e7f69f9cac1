export interface TowerLayer {
  readonly key: string;
  readonly name: string;
  /** Decimal text, as terms hold it. */
  readonly limit: string;
  readonly attachment: string;
  /** Share of 100%. */
  readonly writtenLine: number;
}

export interface TowerBlock extends TowerLayer {
  /** From the ground up, as shares of the tower's height. */
  readonly bottom: number;
  readonly height: number;
  /** Layers that cover the same ground stand side by side in columns. */
  readonly column: number;
  readonly columns: number;
}

/** Layers to scale, lowest first. What cannot be read as an amount stands as nothing. */
export function towerBlocks(layers: readonly TowerLayer[]): readonly TowerBlock[] {
  const spans = layers
    .map((layer) => ({
      layer,
      low: Number(layer.attachment) || 0,
      high: (Number(layer.attachment) || 0) + (Number(layer.limit) || 0),
    }))
    .sort((a, b) => a.low - b.low || a.high - b.high);
  const top = Math.max(1, ...spans.map((span) => span.high));
  const ends: number[] = [];
  const placed = spans.map((span) => {
    const free = ends.findIndex((end) => end <= span.low);
    const column = free < 0 ? ends.length : free;
    ends[column] = span.high;
    return { ...span, column };
  });
  return placed.map(({ layer, low, high, column }) => ({
    ...layer,
    bottom: low / top,
    height: (high - low) / top,
    column,
    columns: ends.length,
  }));
}
