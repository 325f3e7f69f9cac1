/** The theme's colours as a canvas takes them, for the scheme that is shown now. */
export interface Ink {
  readonly paper: string;
  readonly sheet: string;
  readonly rule: string;
  readonly ruleStrong: string;
  readonly ink: string;
  readonly inkSoft: string;
  readonly ember: string;
  readonly emberWash: string;
  readonly reed: string;
  readonly reedWash: string;
  readonly wheat: string;
  readonly wheatDeep: string;
  readonly layers: readonly string[];
  readonly words: string;
  readonly figures: string;
}

export const LAYER_COLOURS = 6;

/** Reads the tokens through a probe, because a custom property itself does not resolve `light-dark()`. */
export function inkOf(host: HTMLElement): Ink {
  const probe = host.ownerDocument.createElement('span');
  probe.style.transition = 'none';
  host.append(probe);
  const style = getComputedStyle(probe);
  const colour = (token: string): string => {
    probe.style.color = `var(--ly-${token})`;
    return style.color;
  };
  const family = (token: string): string => style.getPropertyValue(`--ly-${token}`).trim();
  const ink: Ink = {
    paper: colour('paper'),
    sheet: colour('sheet'),
    rule: colour('rule'),
    ruleStrong: colour('rule-strong'),
    ink: colour('ink'),
    inkSoft: colour('ink-soft'),
    ember: colour('ember'),
    emberWash: colour('ember-wash'),
    reed: colour('reed'),
    reedWash: colour('reed-wash'),
    wheat: colour('wheat'),
    wheatDeep: colour('wheat-deep'),
    layers: Array.from({ length: LAYER_COLOURS }, (_, index) => colour(`layer-${index + 1}`)),
    words: family('words'),
    figures: family('figures'),
  };
  probe.remove();
  return ink;
}
