import * as z from 'zod';
import type { Attempt } from '../../../api/domain/run/run';
import { BLOCK_STATES } from '../../engine';

/** A run of more blocks than these is valued in parts. */
const LARGE = 31;
const BLOCKS_A_PART = 16;

/** Blocks `from` up to `to` of an attempt at a run. */
export interface Part {
  readonly attempt: Attempt;
  readonly from: number;
  readonly to: number;
}

export function isLarge(states: number): boolean {
  return states > LARGE * BLOCK_STATES;
}

export function partsOf(attempt: Attempt, states: number): Part[] {
  const blocks = Math.ceil(states / BLOCK_STATES);
  return Array.from({ length: Math.ceil(blocks / BLOCKS_A_PART) }, (_unused, p) => ({
    attempt,
    from: p * BLOCKS_A_PART,
    to: Math.min((p + 1) * BLOCKS_A_PART, blocks),
  }));
}

const number = z.string().regex(/^\d{1,9}$/).transform(Number);
const partId = z.tuple([z.uuid(), number, number, number]);
const attemptId = z.tuple([z.uuid(), number]);

/** A wake carries an id: of a part, the run's, the attempt's number and its blocks. */
export const idOfPart = ({ attempt, from, to }: Part): string => `${idOfAttempt(attempt)}_${from}_${to}`;
export const idOfAttempt = ({ runId, number: attempt }: Attempt): string => `${runId}_${attempt}`;

export function partFrom(id: string): Part {
  const [runId, attempt, from, to] = partId.parse(id.split('_'));
  return { attempt: { runId, number: attempt }, from, to };
}

export function attemptFrom(id: string): Attempt {
  const [runId, attempt] = attemptId.parse(id.split('_'));
  return { runId, number: attempt };
}
