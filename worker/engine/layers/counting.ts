import type { InuringCover, LayerForm, LayerTerms } from '../model/layer';
import { occurrenceRecovery } from './payoff';

/** What an inuring cover recovers of a loss, given what it has paid this year. */
export function inuringRecovery(loss: number, cover: InuringCover, paid: number): number {
  return Math.min(occurrenceRecovery(loss, cover.limit, cover.attachment), cover.annualLimit - paid);
}

/**
 * What one occurrence counts for before annual terms: its recovery, or its part of an aggregate excess's yearly sum.
 * @param loss of the occurrence after inuring covers
 * @param qualified occurrences of the year so far that reached an n-th event's threshold, this one too if it does
 */
export function countedLoss(loss: number, form: LayerForm, limit: number, attachment: number, qualified: number): number {
  if (form.kind === 'excess') return occurrenceRecovery(loss, limit, attachment);
  if (form.kind === 'nth event') return loss >= form.qualifying && qualified >= form.first ? occurrenceRecovery(loss, limit, attachment) : 0;
  if (loss < form.threshold) return 0;
  const capped = form.cap === null ? loss : Math.min(loss, form.cap);
  return form.counts === 'in full' ? capped : capped - form.threshold;
}

/** Least ground-up loss that can count for anything, a hair below it against rounding. */
export function reachOf(form: LayerForm, attachment: number, quotaShareKept: number, inured: boolean): number {
  if (inured) return 0;
  const least = form.kind === 'excess' ? attachment : form.kind === 'aggregate' ? form.threshold : form.qualifying;
  return (least / quotaShareKept) * (1 - 1e-12);
}

/** Least ground-up loss that any of the layers can count. */
export function reachOfLayers(layers: readonly LayerTerms[]): number {
  return Math.min(...layers.map((layer) => reachOf(layer.form ?? { kind: 'excess' }, layer.attachment, layer.quotaShareKept ?? 1, (layer.inuringCovers ?? []).length > 0)));
}
