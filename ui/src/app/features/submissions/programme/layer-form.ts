import { FormArray, FormControl, FormGroup, Validators } from '@angular/forms';
import type { LayerTerms, ProgrammeTerms } from '@leanyear/contract/programmes';
import { aboveZero } from '../../../shared/form/faults';

export type LayerForm = FormGroup<{
  key: FormControl<string>;
  name: FormControl<string>;
  limit: FormControl<string>;
  attachment: FormControl<string>;
  annualDeductible: FormControl<string>;
  reinstatements: FormControl<string>;
  brokerage: FormControl<number | null>;
  writtenLine: FormControl<number | null>;
}>;

export const MOST_LAYERS = 10;

const percentText = (share: number): string => String(Number((share * 100).toFixed(6)));

/** Prices of reinstatements as they are typed: percentages with blanks or commas between, `100 100` or `0, 50`. */
export function reinstatementsOf(text: string): number[] | null {
  const parts = text.split(/[\s,;]+/).filter((part) => part !== '');
  const prices = parts.map((part) => Number(part.replace(/%$/, '')) / 100);
  return prices.length <= 5 && prices.every((price) => price >= 0 && price <= 5) ? prices : null;
}

export function layerForm(terms: LayerTerms): LayerForm {
  const text = (value: string) => new FormControl(value, { nonNullable: true });
  return new FormGroup({
    key: text(terms.key),
    name: new FormControl(terms.name, { nonNullable: true, validators: [Validators.required] }),
    limit: new FormControl(terms.limit, { nonNullable: true, validators: [Validators.required, aboveZero] }),
    attachment: new FormControl(terms.attachment, { nonNullable: true, validators: [Validators.required] }),
    annualDeductible: text(terms.annualDeductible),
    reinstatements: new FormControl(terms.reinstatements.map(percentText).join(' '), {
      nonNullable: true,
      validators: [
        (control) =>
          reinstatementsOf(String(control.value)) === null
            ? { reinstatements: 'Five percentages at most, each from 0 to 500, such as 100 100.' }
            : null,
      ],
    }),
    brokerage: new FormControl<number | null>(terms.brokerage, [Validators.required]),
    writtenLine: new FormControl<number | null>(terms.writtenLine, [
      Validators.required,
      (control) => (control.value === 0 ? { line: 'A written line is above 0%.' } : null),
    ]),
  });
}

export function termsOf(layer: LayerForm): LayerTerms {
  const value = layer.getRawValue();
  return {
    ...value,
    attachment: value.attachment || '0',
    annualDeductible: value.annualDeductible || '0',
    reinstatements: reinstatementsOf(value.reinstatements) ?? [],
    brokerage: value.brokerage ?? 0,
    writtenLine: value.writtenLine ?? 0,
  };
}

/** A layer on top of the ones there are: as wide as the last, where that ends. */
export function nextLayer(layers: readonly LayerTerms[]): LayerTerms {
  const last = layers[layers.length - 1];
  let number = layers.length + 1;
  while (layers.some((layer) => layer.key === `layer-${number}`)) number += 1;
  return {
    key: `layer-${number}`,
    name: `Layer ${number}`,
    limit: last?.limit ?? '10000000',
    attachment: last === undefined ? '5000000' : String(Number(last.attachment) + Number(last.limit)),
    annualDeductible: '0',
    reinstatements: [1],
    brokerage: last?.brokerage ?? 0.1,
    writtenLine: last?.writtenLine ?? 0.05,
  };
}

/** Layers that cover the same ground: they can be meant, so this is a warning. */
export function overlaps(layers: readonly LayerTerms[]): string[] {
  const spans = layers
    .map(({ name, attachment, limit }) => ({ name, low: Number(attachment), high: Number(attachment) + Number(limit) }))
    .sort((a, b) => a.low - b.low);
  return spans.flatMap((span, i) => {
    const before = spans[i - 1];
    return before !== undefined && span.low < before.high ? [`${span.name} overlaps ${before.name}.`] : [];
  });
}

export function programmeForm(terms: ProgrammeTerms) {
  return new FormGroup({
    name: new FormControl(terms.name, { nonNullable: true, validators: [Validators.required] }),
    currency: new FormControl(terms.currency, { nonNullable: true, validators: [Validators.required, Validators.pattern(/^[A-Z]{3}$/)] }),
    inceptionOn: new FormControl(terms.inceptionOn, { nonNullable: true, validators: [Validators.required] }),
    lossTableIds: new FormControl<string[]>([...terms.lossTableIds], { nonNullable: true, validators: [Validators.required] }),
    layers: new FormArray(terms.layers.map(layerForm)),
  });
}
