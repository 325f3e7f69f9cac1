import { NgTemplateOutlet } from '@angular/common';
import {
  ChangeDetectionStrategy,
  Component,
  computed,
  contentChildren,
  effect,
  ElementRef,
  inject,
  input,
  output,
  signal,
} from '@angular/core';
import { toSignal } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatCheckboxModule } from '@angular/material/checkbox';
import { MatMenuModule } from '@angular/material/menu';
import { MatSortModule, type Sort } from '@angular/material/sort';
import { MatTableModule } from '@angular/material/table';
import { Router, RouterLink } from '@angular/router';
import { AddressState } from '../../core/address-state';
import { LOCALE } from '../../core/locale';
import { Notices } from '../../core/notices';
import { downloadCsv, tabbedOf, type Cell } from '../csv/csv';
import { figure } from '../format/numbers';
import { Icon } from '../icon/icon';
import { CellTemplate } from './cell';
import { found, ordered, textOf, type DataColumn, type Order } from './columns';

/** Rows drawn at first, and with every “more”: a browser draws a few hundred without a pause. */
const STEP = 200;

/**
 * A table of rows that are all here: sorted, searched, columns chosen, copied and downloaded; how it is set stands in the
 * address under its `name`. Rows are walked with the arrow keys; with `link` each opens a page.
 */
@Component({
  selector: 'ly-data-table',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [
    Icon,
    MatButtonModule,
    MatCheckboxModule,
    MatMenuModule,
    MatSortModule,
    MatTableModule,
    NgTemplateOutlet,
    RouterLink,
  ],
  templateUrl: './data-table.html',
  styleUrl: './data-table.scss',
})
export class DataTable<T> {
  private readonly address = inject(AddressState);
  private readonly locale = inject(LOCALE);
  private readonly notices = inject(Notices);
  private readonly router = inject(Router);
  private readonly element = inject<ElementRef<HTMLElement>>(ElementRef).nativeElement;

  readonly rows = input.required<readonly T[]>();
  readonly columns = input.required<readonly DataColumn<T>[]>();
  /** What the table lists, for its caption and the name of the download. */
  readonly label = input.required<string>();
  readonly key = input.required<(row: T) => string>();
  /** Prefix of what it keeps in the address, where a page has several tables. */
  readonly name = input('');
  readonly order = input<Order | null>(null);
  /** Path of the page that a row opens. */
  readonly link = input<((row: T) => string) | null>(null);
  /** Without tools it is only a table: for few rows. */
  readonly tools = input(true);
  /** A row was chosen, by click or Enter; also where there is no link. */
  readonly opened = output<T>();

  protected readonly cells = contentChildren<CellTemplate<T>>(CellTemplate);
  private readonly query = toSignal(this.address.query);
  private readonly limit = signal(STEP);

  protected readonly find = computed(() => this.read('find') ?? '');
  protected readonly hidden = computed(() => new Set((this.read('hide') ?? '').split(',').filter(Boolean)));
  protected readonly sort = computed<Order | null>(() => {
    const key = this.read('sort');
    return key === null
      ? this.order()
      : { key, direction: this.read('direction') === 'desc' ? 'desc' : 'asc' };
  });
  protected readonly visible = computed(() =>
    this.columns().filter((column) => !this.hidden().has(column.key)),
  );
  protected readonly keys = computed(() => this.visible().map((column) => column.key));
  private readonly matching = computed(() => found(this.rows(), this.columns(), this.find()));
  private readonly sorted = computed(() => {
    const sort = this.sort();
    const column = this.columns().find((one) => one.key === sort?.key);
    return sort === null || column === undefined
      ? this.matching()
      : ordered(this.matching(), column, sort.direction, this.locale);
  });
  protected readonly shown = computed(() => this.sorted().slice(0, this.limit()));
  protected readonly more = computed(() => this.sorted().length - this.shown().length);
  protected readonly count = computed(() => {
    const [here, all] = [this.matching().length, this.rows().length].map((count) =>
      figure(count, this.locale),
    );
    return here === all ? `${all ?? ''} in all` : `${here ?? ''} of ${all ?? ''}`;
  });
  /** The row that Tab reaches; arrows move it. */
  protected readonly reached = signal(0);
  protected readonly textOf = textOf<T>;
  protected readonly track = (_: number, row: T): string => this.key()(row);

  constructor() {
    effect(() => {
      this.find();
      this.sort();
      this.limit.set(STEP);
      this.reached.set(0);
    });
  }

  protected templateOf(column: DataColumn<T>): CellTemplate<T> | undefined {
    return this.cells().find((cell) => cell.lyCell() === column.key);
  }

  protected sortBy(sort: Sort): void {
    void this.write({
      sort: sort.direction === '' ? null : sort.active,
      direction: sort.direction === '' ? null : sort.direction,
    });
  }

  protected search(text: string): void {
    void this.write({ find: text === '' ? null : text });
  }

  protected toggle(column: DataColumn<T>): void {
    const hidden = new Set(this.hidden());
    if (!hidden.delete(column.key)) hidden.add(column.key);
    void this.write({ hide: hidden.size === 0 ? null : [...hidden].join(',') });
  }

  protected showMore(): void {
    this.limit.update((limit) => limit + STEP);
  }

  protected open(row: T, event: Event): void {
    const target = event.target as Element | null;
    // What stands in a cell and acts itself, acts alone.
    if (target?.closest('a, button, input, label') && target.closest('tr') !== target) return;
    this.opened.emit(row);
    const path = this.link()?.(row);
    if (path !== undefined) void this.router.navigateByUrl(path);
  }

  protected walk(event: KeyboardEvent, index: number): void {
    if (event.target !== event.currentTarget) return;
    const last = this.shown().length - 1;
    const to = { ArrowDown: index + 1, ArrowUp: index - 1, Home: 0, End: last }[event.key];
    if (to === undefined) return;
    event.preventDefault();
    const reached = Math.max(0, Math.min(last, to));
    this.reached.set(reached);
    this.element.querySelectorAll<HTMLElement>('tr[mat-row]')[reached]?.focus();
  }

  protected async copy(): Promise<void> {
    await navigator.clipboard.writeText(tabbedOf(this.table()));
    this.notices.done(`${figure(this.sorted().length, this.locale)} rows copied.`);
  }

  protected save(): void {
    downloadCsv(`${this.label()}.csv`, this.table());
  }

  private table(): Cell[][] {
    const columns = this.visible();
    const header = columns.map((column) =>
      column.unit ? `${column.header} (${column.unit})` : column.header,
    );
    return [header, ...this.sorted().map((row) => columns.map((column) => column.value(row)))];
  }

  private parameter(part: string): string {
    return this.name() === '' ? part : `${this.name()}-${part}`;
  }

  private read(part: string): string | null {
    return this.query()?.get(this.parameter(part)) ?? null;
  }

  private write(changes: Record<string, string | null>): Promise<void> {
    return this.address.set(
      Object.fromEntries(Object.entries(changes).map(([part, value]) => [this.parameter(part), value])),
    );
  }
}
