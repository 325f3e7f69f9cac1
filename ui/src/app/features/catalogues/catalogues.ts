import { ChangeDetectionStrategy, Component, inject, signal } from '@angular/core';
import { FormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { Router } from '@angular/router';
import { createCatalogue, listCatalogues, type Catalogue } from '@leanyear/contract/catalogues';
import { firstValueFrom } from 'rxjs';
import { Api } from '../../core/api';
import { asProblem } from '../../core/problem';
import { SessionStore } from '../../core/session';
import { CellTemplate } from '../../shared/data-table/cell';
import type { DataColumn } from '../../shared/data-table/columns';
import { DataTable } from '../../shared/data-table/data-table';
import { faultOf, sayFaults } from '../../shared/form/faults';
import { Icon } from '../../shared/icon/icon';
import { StateChip } from '../../shared/state-chip/state-chip';
import { StatePanel } from '../../shared/state-panel/state-panel';

@Component({
  selector: 'ly-catalogues',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [CellTemplate, DataTable, Icon, MatButtonModule, MatFormFieldModule, MatInputModule, ReactiveFormsModule, StateChip, StatePanel],
  template: `
    <div class="page">
      <div class="page-head">
        <div>
          <h1>Event catalogues</h1>
          <p>What can happen, where, and how often. Prices rest on the released version of each.</p>
        </div>
        @if (mayUpload) {
          <button matButton="filled" type="button" (click)="adding.set(!adding())"><ly-icon name="add" /> Open a catalogue</button>
        }
      </div>
      @if (adding()) {
        <form class="sheet" [formGroup]="form" (ngSubmit)="create()">
          <h2>A new catalogue</h2>
          @for (words of refusal(); track words) {
            <p class="fault" role="alert">{{ words }}</p>
          }
          <div class="fields">
            <mat-form-field>
              <mat-label>Name</mat-label>
              <input matInput formControlName="name" />
              <mat-error>{{ faultOf(form.controls.name) }}</mat-error>
            </mat-form-field>
            <mat-form-field>
              <mat-label>What it holds</mat-label>
              <input matInput formControlName="description" />
            </mat-form-field>
          </div>
          <button matButton="filled" type="submit">Open it</button>
        </form>
      }
      @if (catalogues.hasValue()) {
        @if (catalogues.value().length === 0) {
          <ly-state-panel title="No catalogue yet" detail="An actuary opens one, uploads its first version and releases it." />
        } @else {
          <section class="sheet">
            <ly-data-table label="Event catalogues" [rows]="catalogues.value()" [columns]="columns" [key]="keyOf" [link]="linkOf">
              <ng-template lyCell="state" [lyCellOf]="catalogues.value()" let-row><ly-state-chip [state]="row.released ? 'released' : 'draft'" [label]="row.released ? 'released' : 'nothing released'" /></ng-template>
            </ly-data-table>
          </section>
        }
      } @else {
        <ly-state-panel [of]="catalogues" (again)="catalogues.reload()" />
      }
    </div>
  `,
})
export class Catalogues {
  private readonly api = inject(Api);
  private readonly router = inject(Router);
  protected readonly mayUpload = inject(SessionStore).may('catalogues.upload');
  protected readonly catalogues = this.api.resource(listCatalogues, () => ({}));
  protected readonly faultOf = faultOf;
  protected readonly adding = signal(false);
  protected readonly refusal = signal<readonly string[]>([]);
  protected readonly form = inject(FormBuilder).nonNullable.group({ name: ['', Validators.required], description: [''] });
  protected readonly keyOf = (row: Catalogue): string => row.id;
  protected readonly linkOf = (row: Catalogue): string => `/catalogues/${row.id}`;
  protected readonly columns: readonly DataColumn<Catalogue>[] = [
    { key: 'name', header: 'Catalogue', value: (row) => row.name },
    { key: 'description', header: 'What it holds', value: (row) => row.description },
    { key: 'perils', header: 'Perils', value: (row) => (row.released?.perils ?? []).map(({ peril }) => peril).join(', ') },
    { key: 'events', header: 'Events', value: (row) => row.released?.eventCount ?? null, figures: true },
    { key: 'rate', header: 'Rate', unit: 'a year', value: (row) => (row.released === null ? null : Number(row.released.ratePerYear.toFixed(3))), figures: true },
    { key: 'versions', header: 'Versions', value: (row) => row.versions.length, figures: true },
    { key: 'state', header: 'State', value: (row) => (row.released === null ? 'nothing released' : 'released') },
  ];

  protected async create(): Promise<void> {
    this.form.markAllAsTouched();
    if (this.form.invalid) return;
    try {
      const made = await firstValueFrom(this.api.send(createCatalogue, { body: this.form.getRawValue() }));
      await this.router.navigate(['/catalogues', made.id]);
    } catch (error) {
      this.refusal.set(sayFaults(this.form, asProblem(error)));
    }
  }
}
