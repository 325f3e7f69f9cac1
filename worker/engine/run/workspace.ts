import type { LeanBins } from '../measures/lean-bins';
import type { House, HousePart } from '../house/house';
import { houseOf, risklessRateOf } from '../house/house';
import { makeLaws, type Laws } from '../losses/laws';
import { blockIn, isBlock, statesOfBlock, type BlockResult } from '../model/blocks';
import { BLOCK_STATES } from '../model/inputs';
import { doubles, type Allocate } from '../model/memory';
import type { Prepared } from '../model/prepare';
import { EngineInputError } from '../model/refusal';
import { Scratch } from '../blocks/scratch';
import type { Explicable } from '../explain/explain';
import { reachOfLayers } from '../layers/counting';
import type { LayerTerms } from '../model/layer';
import type { Curves } from './valuation';
import type { LayerPart } from './layer-task';

/** Columns over all states, filled block by block; whole numbers of bins beside them. */
export interface StateColumns {
  readonly bookLoss: Float64Array;
  readonly occurrenceLoss: Float64Array;
  readonly aggregateLoss: Float64Array;
  readonly capital: Float64Array;
  readonly slope: Float64Array;
  readonly decile: Uint8Array;
  readonly lensBin: Uint8Array;
}

/** What the threads of a run share: they fill it apart, and read what the others filled once all are done. */
export interface SharedMemory {
  readonly laws: Laws;
  readonly columns: StateColumns;
}

export function shareMemory(size: { rows: number; tabledRows: number; states: number }, allocate: Allocate): SharedMemory {
  const column = (): Float64Array => doubles(allocate, size.states);
  return {
    laws: makeLaws(size.rows, size.tabledRows, allocate),
    columns: {
      bookLoss: column(),
      occurrenceLoss: column(),
      aggregateLoss: column(),
      capital: column(),
      slope: column(),
      decile: new Uint8Array(allocate(size.states)),
      lensBin: new Uint8Array(allocate(size.states)),
    },
  };
}

/** One run while it is valued: its inputs, the memory it fills, and what has been told of it so far. */
export class Workspace {
  readonly blocks: BlockResult[] = [];
  readonly layers: LayerPart[] = [];
  risklessRate = Number.NaN;
  private parts: readonly HousePart[] = [];
  private joinedHouse: House | null = null;
  bins: LeanBins | null = null;
  /** What does not depend on the layers: ground-up exceedance, and the house's tail without the programme. */
  curves: Curves | null = null;
  private ownScratch: Scratch | null = null;

  constructor(
    readonly prepared: Prepared,
    readonly memory: SharedMemory,
    readonly allocate: Allocate,
  ) {}

  /** Of this thread alone. */
  get scratch(): Scratch {
    this.ownScratch ??= new Scratch(eventRanks(this.prepared));
    return this.ownScratch;
  }

  /** The same run with other layers: what was drawn and the house stay, the layers are to be valued. */
  withLayers(layers: readonly LayerTerms[]): Workspace {
    const { prepared } = this;
    const { programme, inputs } = prepared;
    const changed = new Workspace(
      { ...prepared, inputs: { ...inputs, programme: { ...inputs.programme, layers } }, programme: { ...programme, layers, premiums: layers.map(() => 0), reach: reachOfLayers(layers) } },
      this.memory,
      this.allocate,
    );
    changed.blocks.push(...this.blocks);
    changed.takeHouse(this.parts, this.risklessRate);
    changed.bins = this.bins;
    changed.curves = this.curves;
    return changed;
  }

  /** Takes in a block, valued here, by another thread or before a crash. */
  takeBlock(index: number, memory: ArrayBuffer | SharedArrayBuffer): void {
    const states = statesOfBlock(this.prepared.inputs.grid.states, index);
    if (!isBlock(memory, index, states)) throw new Error(`what should be block ${index} of the run is something else`);
    const block = blockIn(memory);
    const { columns } = this.memory;
    const from = index * BLOCK_STATES;
    columns.bookLoss.set(block.bookLoss, from);
    columns.occurrenceLoss.set(block.occurrenceLoss, from);
    columns.aggregateLoss.set(block.aggregateLoss, from);
    this.blocks[index] = block;
  }

  /** Every block in its order. @throws where one is missing */
  allBlocks(): readonly BlockResult[] {
    const { blocks } = this.prepared;
    for (let b = 0; b < blocks; b += 1) if (this.blocks[b] === undefined) throw new EngineInputError('The blocks of a run must all be there.');
    return this.blocks;
  }

  findRate(): number {
    this.risklessRate = risklessRateOf(this.prepared, this.memory.columns.bookLoss);
    return this.risklessRate;
  }

  takeHouse(parts: readonly HousePart[], risklessRate: number): void {
    this.parts = parts;
    this.risklessRate = risklessRate;
    this.joinedHouse = null;
  }

  get house(): House {
    if (this.parts.length === 0) throw new Error('the house is not known yet');
    this.joinedHouse ??= houseOf(this.prepared, this.memory.columns, this.parts, this.risklessRate);
    return this.joinedHouse;
  }

  /** What explaining one of its years needs. */
  get explicable(): Explicable {
    return { prepared: this.prepared, blocks: this.allBlocks(), house: this.house, bookLoss: this.memory.columns.bookLoss };
  }

  get leanBins(): LeanBins {
    if (this.bins === null) throw new Error('the lean order is not known yet');
    return this.bins;
  }
}

/** A number of each event that hangs on its name alone. */
export function eventRanks({ catalogues, events }: Pick<Prepared, 'catalogues' | 'events'>): Uint32Array {
  const ranks = new Uint32Array(events);
  for (const { keys, firstEvent } of catalogues) ranks.set(keys.event0, firstEvent);
  return ranks;
}
