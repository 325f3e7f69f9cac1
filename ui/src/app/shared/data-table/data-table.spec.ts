import { Location } from '@angular/common';
import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { ChangeDetectionStrategy, Component } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { provideRouter, type Routes } from '@angular/router';
import { RouterTestingHarness } from '@angular/router/testing';
import { CellTemplate } from './cell';
import type { DataColumn } from './columns';
import { DataTable } from './data-table';
import { DataTableHarness } from './data-table.harness';

interface Row {
  readonly id: string;
  readonly cedant: string;
  readonly premium: number;
}

@Component({
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [CellTemplate, DataTable],
  template: `
    <ly-data-table label="Submissions" name="s" [rows]="rows" [columns]="columns" [key]="key" [link]="link">
      <ng-template lyCell="cedant" [lyCellOf]="rows" let-row
        ><b>{{ row.cedant }}!</b></ng-template
      >
    </ly-data-table>
  `,
})
class Page {
  static rows: readonly Row[] = [];
  readonly rows = Page.rows;
  readonly columns: readonly DataColumn<Row>[] = [
    { key: 'id', header: 'Reference', value: (row) => row.id },
    { key: 'cedant', header: 'Cedant', value: (row) => row.cedant },
    { key: 'premium', header: 'Premium', value: (row) => row.premium, figures: true },
  ];
  readonly key = (row: Row): string => row.id;
  readonly link = (row: Row): string => `/s/${row.id}`;
}

@Component({ changeDetection: ChangeDetectionStrategy.OnPush, template: 'opened' })
class Opened {}

const routes: Routes = [
  { path: 'list', component: Page },
  { path: 's/:id', component: Opened },
];

const THREE: readonly Row[] = [
  { id: 'A', cedant: 'Mole', premium: 30 },
  { id: 'B', cedant: 'Heron', premium: 10 },
  { id: 'C', cedant: 'Otter', premium: 20 },
];

async function open(rows = THREE, url = '/list') {
  Page.rows = rows;
  TestBed.configureTestingModule({ providers: [provideRouter(routes)] });
  const router = await RouterTestingHarness.create(url);
  const table = await TestbedHarnessEnvironment.loader(router.fixture).getHarness(DataTableHarness);
  return { table, location: TestBed.inject(Location) };
}

describe('a table', () => {
  it('sorts, and keeps how in the address', async () => {
    const { table, location } = await open();
    await table.sortBy('Premium');
    expect((await table.rows()).map((row) => row[0])).toEqual(['B', 'C', 'A']);
    expect(location.path()).toBe('/list?s-sort=premium&s-direction=asc');
  });

  it('is set by its address', async () => {
    const { table } = await open(THREE, '/list?s-sort=premium&s-direction=desc&s-hide=premium');
    expect(await table.headers()).toEqual(['Reference', 'Cedant']);
    expect(await table.rows()).toEqual(['A | Mole!', 'C | Otter!', 'B | Heron!']);
  });

  it('finds rows and counts them', async () => {
    const { table } = await open();
    expect(await table.count()).toBe('3 in all');
    await table.find('otter');
    expect(await table.rows()).toEqual(['C | Otter! | 20']);
    expect(await table.count()).toBe('1 of 3');
  });

  it('is walked with the arrows and opened with Enter', async () => {
    const { table, location } = await open();
    await table.press(0, 'down');
    expect(await table.focusedRow()).toBe(1);
    await table.press(1, 'enter');
    expect(location.path()).toBe('/s/B');
  });

  it('draws many rows in steps', async () => {
    const many = Array.from({ length: 450 }, (_, index) => ({
      id: `R${index}`,
      cedant: 'x',
      premium: index,
    }));
    const { table } = await open(many);
    expect(await table.rows()).toHaveLength(200);
    await table.showMore();
    expect(await table.rows()).toHaveLength(400);
  });
});
