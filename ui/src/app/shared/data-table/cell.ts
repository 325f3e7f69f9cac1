import { Directive, inject, input, TemplateRef } from '@angular/core';

interface CellContext<T> {
  readonly $implicit: T;
}

/**
 * What a cell of one column shows where text is not enough:
 * `<ng-template lyCell="state" [lyCellOf]="rows()" let-row>…</ng-template>`. The rows are named again only for their type.
 */
@Directive({ selector: 'ng-template[lyCell]' })
export class CellTemplate<T> {
  readonly lyCell = input.required<string>();
  readonly lyCellOf = input.required<readonly T[]>();
  readonly template = inject<TemplateRef<CellContext<T>>>(TemplateRef);

  static ngTemplateContextGuard<T>(_cell: CellTemplate<T>, context: unknown): context is CellContext<T> {
    return typeof context === 'object';
  }
}
