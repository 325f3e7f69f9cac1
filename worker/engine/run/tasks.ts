import { housePart, type HousePart } from '../house/house';
import { fillLaws } from '../losses/laws';
import { momentsOf } from '../measures/dense';
import { RETURN_PERIODS, exceedance, type TailPoint } from '../measures/exceedance';
import { leanBins, type LeanBins } from '../measures/lean-bins';
import { exactMeans, type ExactMeans } from '../measures/self-check';
import type { Estimate } from '../measures/sums';
import { valueBlock } from '../blocks/value-block';
import { houseTail } from './house-tail';
import { layerTask, type LayerPart } from './layer-task';
import { programmeTask, type ProgrammePart } from './programme-task';
import type { Workspace } from './workspace';

const ROWS_A_TASK = 2048;

/** One piece of a run's work. Those of one wave need nothing of each other, so that any thread may do any of them. */
export type Task =
  | { readonly kind: 'laws' | 'check'; readonly from: number; readonly to: number }
  | { readonly kind: 'block' | 'house' | 'layer'; readonly index: number }
  | { readonly kind: 'rate' | 'lean' | 'occurrence curve' | 'aggregate curve' | 'programme' | 'house tail before' }
  | { readonly kind: 'house tail after'; readonly premiums: readonly number[] };

/** What a task found, to be told to every thread; what it filled in shared memory needs no telling. */
export type Found =
  | { readonly kind: 'laws' }
  | { readonly kind: 'check'; readonly means: ExactMeans }
  | { readonly kind: 'block'; readonly index: number; readonly memory: ArrayBuffer | SharedArrayBuffer }
  | { readonly kind: 'rate'; readonly risklessRate: number }
  | { readonly kind: 'house'; readonly part: HousePart }
  | { readonly kind: 'lean'; readonly bins: LeanBins }
  | { readonly kind: 'layer'; readonly index: number; readonly layer: LayerPart }
  | { readonly kind: 'curve'; readonly mean: Estimate; readonly points: readonly TailPoint[] }
  | { readonly kind: 'programme'; readonly programme: ProgrammePart }
  | { readonly kind: 'tail'; readonly points: readonly TailPoint[] };

export function perform(workspace: Workspace, task: Task): Found {
  const { prepared, memory } = workspace;
  const { columns } = memory;
  switch (task.kind) {
    case 'laws':
      for (const table of prepared.tables) {
        const rows = table.slot.length;
        const from = Math.max(task.from - table.firstRow, 0);
        fillLaws(memory.laws, table, from, Math.min(task.to - table.firstRow, rows));
      }
      return { kind: 'laws' };
    case 'check':
      return { kind: 'check', means: exactMeans(prepared, task.from, task.to) };
    case 'block':
      return { kind: 'block', index: task.index, memory: valueBlock(prepared, memory.laws, task.index, workspace.allocate, workspace.scratch) };
    case 'rate':
      return { kind: 'rate', risklessRate: workspace.findRate() };
    case 'house':
      return { kind: 'house', part: housePart(prepared, columns, task.index, workspace.risklessRate) };
    case 'lean':
      return { kind: 'lean', bins: leanBins(workspace.house, columns.decile, columns.lensBin) };
    case 'layer':
      return { kind: 'layer', index: task.index, layer: layerTask(workspace, task.index) };
    case 'occurrence curve':
    case 'aggregate curve': {
      const column = task.kind === 'occurrence curve' ? columns.occurrenceLoss : columns.aggregateLoss;
      const { value, standardError } = momentsOf(column);
      return { kind: 'curve', mean: { value, standardError }, points: exceedance(column, RETURN_PERIODS) };
    }
    case 'programme':
      return { kind: 'programme', programme: programmeTask(workspace) };
    case 'house tail before':
      return { kind: 'tail', points: houseTail(workspace, null) };
    case 'house tail after':
      return { kind: 'tail', points: houseTail(workspace, task.premiums) };
  }
}

function chunks(from: number, rows: number): { from: number; to: number }[] {
  return Array.from({ length: Math.floor((rows + ROWS_A_TASK - 1) / ROWS_A_TASK) }, (_unused, c) => ({
    from: from + c * ROWS_A_TASK,
    to: from + Math.min((c + 1) * ROWS_A_TASK, rows),
  }));
}

/** The programme's rows come first in the numbering. */
function programmeRows(workspace: Workspace): number {
  return workspace.prepared.programme.tables.reduce((rows, table) => rows + table.slot.length, 0);
}

/** A run as waves of tasks; each wave needs what the ones before it found. */
export const WAVES = {
  laws: (workspace: Workspace): Task[] => chunks(0, workspace.prepared.rows).map((chunk) => ({ kind: 'laws', ...chunk })),
  blocks: (workspace: Workspace): Task[] => Array.from({ length: workspace.prepared.blocks }, (_unused, index): Task => ({ kind: 'block', index })),
  rate: (): Task[] => [{ kind: 'rate' }],
  house: (workspace: Workspace): Task[] => Array.from({ length: workspace.prepared.blocks }, (_unused, index): Task => ({ kind: 'house', index })),
  lean: (): Task[] => [{ kind: 'lean' }],
  layers: (workspace: Workspace): Task[] => workspace.prepared.programme.layers.map((_layer, index): Task => ({ kind: 'layer', index })),
  programme: (): Task[] => [{ kind: 'programme' }],
  check: (workspace: Workspace): Task[] => chunks(0, programmeRows(workspace)).map((chunk): Task => ({ kind: 'check', ...chunk })),
  curves: (): Task[] => [{ kind: 'occurrence curve' }, { kind: 'aggregate curve' }, { kind: 'house tail before' }],
  after: (premiums: readonly number[]): Task[] => [{ kind: 'house tail after', premiums }],
} as const;
