import { Directive, inject, input, TemplateRef } from '@angular/core';

/** What a cell of one column shows where text is not enough: `<ng-template lyCell="state" let-row>…</ng-template>`. */
@Directive({ selector: 'ng-template[lyCell]' })
export class CellTemplate {
  readonly key = input.required<string>({ alias: 'lyCell' });
  readonly template = inject<TemplateRef<{ $implicit: unknown }>>(TemplateRef);
}
