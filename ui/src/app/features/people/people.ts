import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { toSignal } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { MatSelectModule } from '@angular/material/select';
import { createPerson, listFirms, listPeople, type Person } from '@leanyear/contract/people';
import { ROLES, type Role } from '@leanyear/vocabulary';
import { firstValueFrom } from 'rxjs';
import { Api } from '../../core/api';
import { asProblem } from '../../core/problem';
import { SessionStore } from '../../core/session';
import type { DataColumn } from '../../shared/data-table/columns';
import { DataTable } from '../../shared/data-table/data-table';
import { faultOf, sayFaults } from '../../shared/form/faults';
import { Icon } from '../../shared/icon/icon';
import { StatePanel } from '../../shared/state-panel/state-panel';

@Component({
  selector: 'ly-people',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [DataTable, Icon, MatButtonModule, MatFormFieldModule, MatInputModule, MatSelectModule, ReactiveFormsModule, StatePanel],
  template: `
    <div class="page">
      <div class="page-head">
        <div>
          <h1>People</h1>
          <p>Who works here and for which firm. Open one to see their authority.</p>
        </div>
        @if (mayWrite) {
          <button matButton="filled" type="button" (click)="adding.set(!adding())"><ly-icon name="person_add" /> Open an account</button>
        }
      </div>
      @if (first(); as password) {
        <p class="sheet" role="status">The first password of {{ password.name }} is <code class="figures">{{ password.password }}</code>. It is shown this once: pass it on by a safe way.</p>
      }
      @if (adding()) {
        <form class="sheet" [formGroup]="form" (ngSubmit)="open()">
          <h2>A new account</h2>
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
              <mat-label>E-mail</mat-label>
              <input matInput type="email" formControlName="email" />
              <mat-error>{{ faultOf(form.controls.email) }}</mat-error>
            </mat-form-field>
            <mat-form-field>
              <mat-label>Role</mat-label>
              <mat-select formControlName="role">
                @for (role of roles; track role) {
                  <mat-option [value]="role">{{ role }}</mat-option>
                }
              </mat-select>
            </mat-form-field>
            @if (isBroker()) {
              <mat-form-field>
                <mat-label>Broker firm</mat-label>
                <mat-select formControlName="firmId">
                  @for (firm of firms.hasValue() ? firms.value() : []; track firm.id) {
                    <mat-option [value]="firm.id">{{ firm.name }}</mat-option>
                  }
                </mat-select>
                <mat-error>{{ faultOf(form.controls.firmId) }}</mat-error>
              </mat-form-field>
            }
          </div>
          <button matButton="filled" type="submit">Open the account</button>
        </form>
      }
      @if (people.hasValue()) {
        <section class="sheet">
          <ly-data-table label="People" [rows]="people.value()" [columns]="columns" [key]="keyOf" [link]="linkOf" />
        </section>
      } @else {
        <ly-state-panel [of]="people" (again)="people.reload()" />
      }
    </div>
  `,
})
export class People {
  private readonly api = inject(Api);
  protected readonly mayWrite = inject(SessionStore).may('people.write');
  protected readonly people = this.api.resource(listPeople, () => ({}));
  protected readonly firms = this.api.resource(listFirms, () => ({}));
  protected readonly roles = ROLES;
  protected readonly faultOf = faultOf;
  protected readonly adding = signal(false);
  protected readonly first = signal<{ readonly name: string; readonly password: string } | null>(null);
  protected readonly refusal = signal<readonly string[]>([]);
  protected readonly form = new FormGroup({
    name: new FormControl('', { nonNullable: true, validators: [Validators.required] }),
    email: new FormControl('', { nonNullable: true, validators: [Validators.required, Validators.email] }),
    role: new FormControl<Role>('underwriter', { nonNullable: true }),
    firmId: new FormControl<string | null>(null),
  });
  private readonly role = toSignal(this.form.controls.role.valueChanges, { initialValue: 'underwriter' });
  protected readonly isBroker = computed(() => this.role() === 'broker');
  protected readonly keyOf = (row: Person): string => row.id;
  protected readonly linkOf = (row: Person): string => `/people/${row.id}`;
  protected readonly columns: readonly DataColumn<Person>[] = [
    { key: 'name', header: 'Name', value: (row) => row.name },
    { key: 'role', header: 'Role', value: (row) => row.role },
    { key: 'firm', header: 'Firm', value: (row) => row.firm?.name ?? null },
    { key: 'email', header: 'E-mail', value: (row) => row.email },
    { key: 'active', header: 'Account', value: (row) => (row.active ? 'on' : 'off') },
  ];

  protected async open(): Promise<void> {
    this.form.markAllAsTouched();
    if (this.form.invalid) return;
    const value = this.form.getRawValue();
    try {
      const made = await firstValueFrom(this.api.send(createPerson, { body: { ...value, firmId: value.role === 'broker' ? value.firmId : null } }));
      this.first.set({ name: made.person.name, password: made.firstPassword });
      this.adding.set(false);
      this.form.reset();
      this.people.reload();
    } catch (error) {
      this.refusal.set(sayFaults(this.form, asProblem(error)));
    }
  }
}
