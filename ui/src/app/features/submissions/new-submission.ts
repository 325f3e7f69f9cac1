import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { toSignal } from '@angular/core/rxjs-interop';
import { FormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { MatSelectModule } from '@angular/material/select';
import { Router, RouterLink } from '@angular/router';
import { createCedant, listCedants, listFirms } from '@leanyear/contract/people';
import { createSubmission } from '@leanyear/contract/submissions';
import { firstValueFrom } from 'rxjs';
import { Api } from '../../core/api';
import { asProblem } from '../../core/problem';
import { faultOf, sayFaults } from '../../shared/form/faults';
import { StatePanel } from '../../shared/state-panel/state-panel';

@Component({
  selector: 'ly-new-submission',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [MatButtonModule, MatFormFieldModule, MatInputModule, MatSelectModule, ReactiveFormsModule, RouterLink, StatePanel],
  templateUrl: './new-submission.html',
})
export class NewSubmission {
  private readonly api = inject(Api);
  private readonly router = inject(Router);
  protected readonly cedants = this.api.resource(listCedants, () => ({}));
  protected readonly firms = this.api.resource(listFirms, () => ({}));
  protected readonly faultOf = faultOf;
  protected readonly busy = signal(false);
  protected readonly refusal = signal<readonly string[]>([]);

  protected readonly form = inject(FormBuilder).nonNullable.group({
    cedantId: ['', Validators.required],
    brokerFirmId: ['', Validators.required],
    contactId: ['', Validators.required],
    treatyYear: [new Date().getUTCFullYear() + 1, Validators.required],
    inceptionOn: [`${new Date().getUTCFullYear() + 1}-01-01`, Validators.required],
    currency: ['EUR', [Validators.required, Validators.pattern(/^[A-Z]{3}$/)]],
    note: [''],
  });
  protected readonly cedantForm = inject(FormBuilder).nonNullable.group({
    name: ['', Validators.required],
    territory: ['', Validators.required],
  });
  protected readonly addingCedant = signal(false);
  private readonly firmId = toSignal(this.form.controls.brokerFirmId.valueChanges, { initialValue: '' });
  protected readonly contacts = computed(() =>
    this.firms.hasValue() ? (this.firms.value().find((firm) => firm.id === this.firmId())?.contacts ?? []) : [],
  );

  protected async addCedant(): Promise<void> {
    this.cedantForm.markAllAsTouched();
    if (this.cedantForm.invalid) return;
    try {
      const made = await firstValueFrom(this.api.send(createCedant, { body: this.cedantForm.getRawValue() }));
      this.cedants.reload();
      this.form.controls.cedantId.setValue(made.id);
      this.addingCedant.set(false);
    } catch (error) {
      this.refusal.set(sayFaults(this.cedantForm, asProblem(error)));
    }
  }

  protected async open(): Promise<void> {
    this.form.markAllAsTouched();
    if (this.form.invalid || this.busy()) return;
    this.busy.set(true);
    try {
      const made = await firstValueFrom(this.api.send(createSubmission, { body: this.form.getRawValue() }));
      await this.router.navigate(['/submissions', made.id, 'losses']);
    } catch (error) {
      this.refusal.set(sayFaults(this.form, asProblem(error)));
    } finally {
      this.busy.set(false);
    }
  }
}
