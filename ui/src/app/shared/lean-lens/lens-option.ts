import type { LensBin } from '@leanyear/contract/runs';
import type { EChartsCoreOption } from 'echarts/core';
import type { Ink } from '../chart/ink';

export interface LensLayer {
  readonly name: string;
  /** Place of the layer in the bins' lists; gives its colour too, so that hiding others does not repaint it. */
  readonly index: number;
}

type Point = [number, number];
/** Dashes repeat only after more layers than a programme has colours for. */
const DASHES = ['solid', [7, 3], [2, 3], [9, 3, 2, 3]] as const;
const PANELS = [
  { top: 34, height: 96 },
  { top: 182, height: 112 },
  { top: 346, height: 136 },
] as const;
export const LENS_HEIGHT = 540;

/** The left end of the first bar is a share of zero, which a logarithmic axis does not have. */
export function leftmost(bins: readonly LensBin[]): number {
  const first = bins[0];
  if (first === undefined) return 1e-4;
  return first.shareFrom > 0 ? first.shareFrom : first.shareTo / 2;
}

/** Corners of a line that stays level over each bar. */
function steps(bins: readonly LensBin[], value: (bin: LensBin) => number): Point[] {
  const left = leftmost(bins);
  const points = bins.map((bin): Point => [Math.max(bin.shareFrom, left), value(bin)]);
  const last = bins.at(-1);
  return last === undefined ? points : [...points, [last.shareTo, value(last)]];
}

function shareWords(share: number): string {
  return share >= 0.01
    ? `${Number((share * 100).toPrecision(3))}%`
    : `1 in ${Math.round(1 / share).toLocaleString('en')}`;
}

function axisName(ink: Ink, text: string, index: number): object {
  return {
    type: 'text',
    left: 0,
    top: (PANELS[index]?.top ?? 0) - 26,
    style: { text, fill: ink.inkSoft, font: `500 12px ${ink.words}` },
  };
}

/** Hunger above, payoff in the middle, their product below: one axis of states, leanest at the left, the lean end stretched. */
export function lensOption(
  ink: Ink,
  bins: readonly LensBin[],
  layers: readonly LensLayer[],
): EChartsCoreOption {
  const axisLabel = { color: ink.inkSoft, fontFamily: ink.figures, fontSize: 11 };
  const line = { lineStyle: { color: ink.rule } };
  const series = (panel: number, name: string, data: Point[], look: object): object => ({
    type: 'line',
    name,
    xAxisIndex: panel,
    yAxisIndex: panel,
    step: 'end',
    symbol: 'none',
    data,
    animationDuration: 300,
    ...look,
  });
  const dash = (index: number): unknown => DASHES[Math.floor(index / ink.layers.length) % DASHES.length];
  return {
    grid: PANELS.map(({ top, height }) => ({ left: 52, right: 14, top, height, outerBoundsMode: 'none' })),
    axisPointer: { link: [{ xAxisIndex: 'all' }], lineStyle: { color: ink.ruleStrong } },
    tooltip: {
      trigger: 'axis',
      renderMode: 'richText',
      backgroundColor: ink.sheet,
      borderColor: ink.ruleStrong,
      textStyle: { color: ink.ink, fontSize: 12, fontFamily: ink.words },
      formatter: (
        hovered: readonly {
          readonly axisValue: number;
          readonly seriesName: string;
          readonly value: Point;
        }[],
      ) => {
        const [first] = hovered;
        if (first === undefined) return '';
        return [
          `State ${shareWords(first.axisValue)} from the leanest`,
          ...hovered.map((one) => `${one.seriesName}  ${Number(one.value[1].toPrecision(3))}`),
        ].join('\n');
      },
    },
    xAxis: PANELS.map((_, panel) => ({
      type: 'log',
      gridIndex: panel,
      min: leftmost(bins),
      max: 1,
      axisLine: { lineStyle: { color: ink.ruleStrong } },
      axisTick: { lineStyle: { color: ink.ruleStrong } },
      splitLine: { show: true, ...line },
      axisLabel: { ...axisLabel, show: panel === 2, formatter: shareWords, hideOverlap: true },
      axisPointer: { label: { show: false } },
    })),
    yAxis: PANELS.map((_, panel) => ({
      type: panel === 0 ? 'log' : 'value',
      gridIndex: panel,
      splitNumber: 3,
      ...(panel === 0 ? {} : { min: 0 }),
      axisLine: { show: false },
      axisTick: { show: false },
      axisLabel: { ...axisLabel, ...(panel === 0 ? { formatter: (value: number) => `${value}×` } : {}) },
      splitLine: { show: true, ...line },
    })),
    series: [
      series(
        0,
        'Hunger',
        steps(bins, (bin) => bin.hunger),
        {
          lineStyle: { color: ink.ember, width: 2 },
          areaStyle: { color: ink.emberWash, origin: 'start', opacity: 0.9 },
          itemStyle: { color: ink.ember },
        },
      ),
      ...layers.flatMap(({ name, index }) => {
        const colour = ink.layers[index % ink.layers.length] ?? ink.ink;
        const stroke = { color: colour, width: 2, type: dash(index) };
        return [
          series(
            1,
            `${name}: payoff`,
            steps(bins, (bin) => bin.payoff[index] ?? 0),
            { lineStyle: stroke, itemStyle: { color: colour } },
          ),
          series(
            2,
            `${name}: product`,
            steps(bins, (bin) => bin.product[index] ?? 0),
            {
              lineStyle: stroke,
              itemStyle: { color: colour },
              areaStyle: { color: colour, opacity: 0.22 },
            },
          ),
          series(
            2,
            `${name}: without hunger`,
            steps(bins, (bin) => bin.plain[index] ?? 0),
            {
              lineStyle: { color: colour, width: 1.25, type: [3, 3] },
              itemStyle: { color: colour },
            },
          ),
        ];
      }),
    ],
    graphic: [
      'Hunger: capital strain m ÷ E[m]',
      'Mean payoff ÷ limit',
      'Product, whose area is the price (dashed: no hunger)',
    ].map((text, index) => axisName(ink, text, index)),
  };
}
