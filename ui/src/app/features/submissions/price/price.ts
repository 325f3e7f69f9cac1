import { ChangeDetectionStrategy, Component, computed, effect, inject, input, signal, untracked } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { FormControl, ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatSelectModule } from '@angular/material/select';
import { RouterLink } from '@angular/router';
import { cancelRun, listRuns, readRun, startRun, type RunSummary } from '@leanyear/contract/runs';
import { firstValueFrom } from 'rxjs';
import { AddressState } from '../../../core/address-state';
import { Api } from '../../../core/api';
import { EventStream } from '../../../core/event-stream';
import { asProblem } from '../../../core/problem';
import { SessionStore } from '../../../core/session';
import { FigurePipe, MomentPipe } from '../../../shared/format/pipes';
import { ProgressPanel } from '../../../shared/progress-panel/progress-panel';
import { StateChip } from '../../../shared/state-chip/state-chip';
import { StatePanel } from '../../../shared/state-panel/state-panel';
import { SubmissionStore } from '../submission-store';
import { DraftQuote } from './draft-quote';
import { PriceResult } from './price-result';

const OPEN = ['queued', 'running', 'cancelling'];

/** The price of a programme: runs started, watched and read. */
@Component({
  selector: 'ly-price',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [
    DraftQuote, FigurePipe, MatButtonModule, MatFormFieldModule, MatSelectModule, MomentPipe, PriceResult, ProgressPanel, ReactiveFormsModule,
    RouterLink, StateChip, StatePanel,
  ],
  templateUrl: './price.html',
})
export class Price {
  private readonly api = inject(Api);
  private readonly address = inject(AddressState);
  private readonly session = inject(SessionStore);
  protected readonly store = inject(SubmissionStore);
  readonly programme = input<string>();
  readonly run = input<string>();
  /** In the address after "Price this": a run starts by itself, once. */
  readonly start = input<string>();

  protected readonly mayStart = this.session.may('runs.start');
  protected readonly mayDraft = this.session.may('quotes.draft');
  protected readonly states = new FormControl(500_000, { nonNullable: true });
  protected readonly sizes = [50_000, 100_000, 500_000, 1_000_000];
  protected readonly refusal = signal<readonly string[]>([]);
  protected readonly busy = signal(false);

  protected readonly present = computed(() => this.store.programmeAt(this.programme()));
  protected readonly runs = this.api.resource(listRuns, () => {
    const present = this.present();
    return present === null ? undefined : { params: { id: present.id } };
  });
  private readonly runId = computed(() => this.run() ?? (this.runs.hasValue() ? this.runs.value()[0]?.id : undefined));
  protected readonly shown = this.api.resource(readRun, () => {
    const id = this.runId();
    return id === undefined ? undefined : { params: { id } };
  });
  /** Progress as it is told, ahead of the row. */
  private readonly told = signal<{ readonly id: string; readonly progress: RunSummary['progress'] } | null>(null);
  protected readonly progress = computed(() => {
    if (!this.shown.hasValue()) return null;
    const run = this.shown.value();
    const told = this.told();
    return told?.id === run.id ? told.progress : run.progress;
  });
  protected readonly open = computed(() => this.shown.hasValue() && OPEN.includes(this.shown.value().state));

  constructor() {
    effect(() => {
      if (this.start() === undefined || this.present() === null) return;
      untracked(() => void this.begin());
    });
    inject(EventStream)
      .on('run', 'book', 'catalogue')
      .pipe(takeUntilDestroyed())
      .subscribe((told) => {
        if (told.topic === 'run' && told.id !== this.runId()) return;
        if (told.topic === 'run' && told.progress !== undefined && told.state === 'running') {
          this.told.set({ id: told.id, progress: told.progress });
          if (this.shown.hasValue() && this.shown.value().state === 'running') return;
        }
        this.shown.reload();
        this.runs.reload();
      });
  }

  protected async begin(): Promise<void> {
    const present = this.present();
    if (present === null || this.busy()) return;
    this.busy.set(true);
    this.refusal.set([]);
    try {
      await this.address.set({ start: null });
      const run = await firstValueFrom(
        this.api.send(startRun, { params: { id: present.id }, body: { states: this.states.value }, idempotencyKey: crypto.randomUUID() }),
      );
      await this.address.set({ programme: present.id, run: run.id });
      this.runs.reload();
    } catch (error) {
      this.refusal.set(asProblem(error).words);
    } finally {
      this.busy.set(false);
    }
  }

  protected async cancel(): Promise<void> {
    const id = this.runId();
    if (id === undefined) return;
    await firstValueFrom(this.api.send(cancelRun, { params: { id } }));
    this.shown.reload();
  }

  protected show(id: string): void {
    void this.address.set({ run: id });
  }
}
