import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { FormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { MatSelectModule } from '@angular/material/select';
import { listCatalogues } from '@leanyear/contract/catalogues';
import type { FileReport } from '@leanyear/contract/files';
import { listLossRows, uploadLossTable, type LossTable } from '@leanyear/contract/submissions';
import { Api } from '../../../core/api';
import { Notices } from '../../../core/notices';
import { asProblem } from '../../../core/problem';
import { SessionStore } from '../../../core/session';
import { Amount } from '../../../shared/amount/amount';
import { FileDrop } from '../../../shared/file-drop/file-drop';
import { faultOf, sayFaults } from '../../../shared/form/faults';
import { FigurePipe, MomentPipe, SharePipe } from '../../../shared/format/pipes';
import { ProblemList } from '../../../shared/problem-list/problem-list';
import { ProgressPanel } from '../../../shared/progress-panel/progress-panel';
import { StatePanel } from '../../../shared/state-panel/state-panel';
import { SubmissionStore } from '../submission-store';

const ROWS = 25;

@Component({
  selector: 'ly-losses',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [
    Amount, FigurePipe, FileDrop, MatButtonModule, MatFormFieldModule, MatInputModule, MatSelectModule, MomentPipe,
    ProblemList, ProgressPanel, ReactiveFormsModule, SharePipe, StatePanel,
  ],
  templateUrl: './losses.html',
})
export class Losses {
  private readonly api = inject(Api);
  private readonly notices = inject(Notices);
  protected readonly store = inject(SubmissionStore);
  protected readonly mayWrite = inject(SessionStore).may('submissions.write');
  protected readonly catalogues = this.api.resource(listCatalogues, () => ({}));
  protected readonly released = computed(() => (this.catalogues.hasValue() ? this.catalogues.value().filter((one) => one.released !== null) : []));
  protected readonly faultOf = faultOf;

  protected readonly form = inject(FormBuilder).nonNullable.group({
    name: ['', Validators.required],
    catalogueId: ['', Validators.required],
    currency: ['', [Validators.required, Validators.pattern(/^[A-Z]{3}$/)]],
    basisNote: [''],
  });
  protected readonly sending = signal<{ readonly name: string; readonly sent: number; readonly total: number } | null>(null);
  protected readonly report = signal<FileReport | null>(null);
  protected readonly refusal = signal<readonly string[]>([]);

  protected readonly shown = signal<LossTable | null>(null);
  protected readonly offset = signal(0);
  protected readonly rows = this.api.resource(listLossRows, () => {
    const table = this.shown();
    return table === null ? undefined : { params: { id: table.id }, query: { offset: this.offset(), limit: ROWS } };
  });
  protected readonly pageSize = ROWS;

  protected show(table: LossTable): void {
    this.offset.set(0);
    this.shown.set(this.shown()?.id === table.id ? null : table);
  }

  protected send(file: File): void {
    const id = this.store.id();
    this.report.set(null);
    this.refusal.set([]);
    const currency = this.form.controls.currency;
    if (currency.value === '' && this.store.submission.hasValue()) currency.setValue(this.store.submission.value().currency);
    this.form.markAllAsTouched();
    if (this.form.invalid || id === undefined) {
      this.refusal.set(['Name the table, its catalogue and its currency first; then give the file again.']);
      return;
    }
    this.sending.set({ name: file.name, sent: 0, total: file.size });
    this.api.upload(uploadLossTable, { params: { id }, body: this.form.getRawValue() }, file).subscribe({
      next: (step) => {
        if ('reply' in step) {
          this.sending.set(null);
          this.notices.done(`${step.reply.name}, version ${step.reply.number}: ${step.reply.rowCount} rows taken in.`);
          this.form.controls.name.reset('');
          this.store.reload();
        } else this.sending.set({ name: file.name, ...step });
      },
      error: (error: unknown) => {
        this.sending.set(null);
        const problem = asProblem(error);
        if (problem.report) this.report.set(problem.report);
        else this.refusal.set(sayFaults(this.form, problem));
      },
    });
  }
}
