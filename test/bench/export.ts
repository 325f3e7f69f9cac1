import { closeSync, mkdirSync, openSync, writeSync } from 'node:fs';
import { join } from 'node:path';
import { drawLosses, pickLosses } from '../../worker/engine/blocks/contract-losses';
import { openWorkspace } from '../../worker/engine';
import { WAVES, perform } from '../../worker/engine/run/tasks';
import { BLOCK_STATES, type ValuationInputs } from '../../worker/engine/model/inputs';
import { statesOfBlock, type BlockLosses } from '../../worker/engine/model/blocks';
import { drawOccurrences } from '../../worker/engine/random/occurrences';

/**
 * Writes every occurrence that the engine draws, in order of state and day, with its loss to the programme and to the
 * book, as raw columns: what the comparators price with `--occurrences`.
 */
export function exportOccurrences(folder: string, inputs: ValuationInputs): void {
  mkdirSync(folder, { recursive: true });
  const workspace = openWorkspace(inputs);
  for (const task of WAVES.laws(workspace)) perform(workspace, task);
  const { prepared, memory } = workspace;
  const [contract] = prepared.book;
  if (contract === undefined) throw new Error('a case has a book');
  const files = Object.fromEntries(['state.u32', 'event.u32', 'day.f64', 'programme_loss.f64', 'book_loss.f64'].map((name) => [name, openSync(join(folder, name), 'w')]));
  const write = (name: string, column: Uint32Array | Float64Array): void => {
    const file = files[name];
    if (file !== undefined) writeSync(file, new Uint8Array(column.buffer, column.byteOffset, column.byteLength));
  };
  const scratch = workspace.scratch;
  const { occurrences } = scratch;
  for (let block = 0; block < prepared.blocks; block += 1) {
    const states = statesOfBlock(inputs.grid.states, block);
    drawOccurrences(occurrences, prepared.catalogues, block, states, inputs.programme.inceptionDay);
    scratch.makeRoom();
    const { count } = occurrences;
    const losses = [prepared.programme, contract].map((of) => {
      drawLosses(scratch, of, memory.laws, block);
      return scratch.losses.slice(0, count);
    });
    // Every occurrence counts here, also one without loss.
    for (let e = 0; e < prepared.events; e += 1) for (let i = occurrences.eventStart[e] ?? 0; i < (occurrences.eventStart[e + 1] ?? 0); i += 1) [scratch.event[i], scratch.place[i]] = [e, i];
    const columns = losses.map((own): BlockLosses => {
      scratch.losses.set(own);
      const into = { count, state: new Uint16Array(count), event: new Uint32Array(count), day: new Float64Array(count), loss: new Float64Array(count) };
      pickLosses(into, scratch, states);
      return into;
    });
    const [programme, book] = columns;
    if (programme === undefined || book === undefined) continue;
    write('state.u32', Uint32Array.from(programme.state, (state) => state + block * BLOCK_STATES));
    write('event.u32', programme.event);
    write('day.f64', programme.day);
    write('programme_loss.f64', programme.loss);
    write('book_loss.f64', book.loss);
  }
  for (const file of Object.values(files)) closeSync(file);
}
