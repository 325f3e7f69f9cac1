import { ChangeDetectionStrategy, Component, computed, effect, inject, input, signal } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import {
  listCatalogueEvents, readCatalogue, releaseCatalogueVersion, uploadCatalogueVersion, withdrawCatalogueVersion, type CatalogueVersion,
} from '@leanyear/contract/catalogues';
import type { FileReport } from '@leanyear/contract/files';
import { firstValueFrom } from 'rxjs';
import { Api } from '../../core/api';
import { EventStream } from '../../core/event-stream';
import { Notices } from '../../core/notices';
import { asProblem } from '../../core/problem';
import { SessionStore } from '../../core/session';
import { DeskTitle } from '../../core/title';
import { Confirm } from '../../shared/confirm/confirm';
import { FileDrop } from '../../shared/file-drop/file-drop';
import { FigurePipe, MomentPipe } from '../../shared/format/pipes';
import { ProblemList } from '../../shared/problem-list/problem-list';
import { ProgressPanel } from '../../shared/progress-panel/progress-panel';
import { StateChip } from '../../shared/state-chip/state-chip';
import { StatePanel } from '../../shared/state-panel/state-panel';

const ROWS = 25;

@Component({
  selector: 'ly-catalogue',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [FigurePipe, FileDrop, MatButtonModule, MatFormFieldModule, MatInputModule, MomentPipe, ProblemList, ProgressPanel, StateChip, StatePanel],
  templateUrl: './catalogue.html',
})
export class CataloguePage {
  private readonly api = inject(Api);
  private readonly notices = inject(Notices);
  private readonly confirm = inject(Confirm);
  private readonly session = inject(SessionStore);
  readonly catalogueId = input.required<string>();
  protected readonly mayUpload = this.session.may('catalogues.upload');
  protected readonly mayRelease = this.session.may('catalogues.release');
  protected readonly catalogue = this.api.resource(readCatalogue, () => ({ params: { id: this.catalogueId() } }));

  private readonly picked = signal<string | null>(null);
  protected readonly version = computed<CatalogueVersion | null>(() => {
    if (!this.catalogue.hasValue()) return null;
    const { versions, released } = this.catalogue.value();
    return versions.find((one) => one.id === this.picked()) ?? released ?? versions[0] ?? null;
  });
  protected readonly search = signal('');
  protected readonly offset = signal(0);
  protected readonly pageSize = ROWS;
  protected readonly events = this.api.resource(listCatalogueEvents, () => {
    const version = this.version();
    const search = this.search();
    return version === null ? undefined : { params: { id: version.id }, query: { offset: this.offset(), limit: ROWS, ...(search === '' ? {} : { search }) } };
  });

  protected readonly sending = signal<{ readonly name: string; readonly sent: number; readonly total: number } | null>(null);
  protected readonly report = signal<FileReport | null>(null);
  protected readonly refusal = signal<readonly string[]>([]);

  constructor() {
    const title = inject(DeskTitle);
    effect(() => {
      if (this.catalogue.hasValue()) title.name(this.catalogue.value().name);
    });
    inject(EventStream)
      .on('catalogue')
      .pipe(takeUntilDestroyed())
      .subscribe(() => this.catalogue.reload());
  }

  protected show(version: CatalogueVersion): void {
    this.picked.set(version.id);
    this.offset.set(0);
  }

  protected find(text: string): void {
    this.search.set(text.trim());
    this.offset.set(0);
  }

  protected send(file: File): void {
    this.report.set(null);
    this.refusal.set([]);
    this.sending.set({ name: file.name, sent: 0, total: file.size });
    this.api.upload(uploadCatalogueVersion, { params: { id: this.catalogueId() } }, file).subscribe({
      next: (step) => {
        if ('reply' in step) {
          this.sending.set(null);
          this.notices.done(`Version ${step.reply.number}: ${step.reply.eventCount} events taken in. Release it to price on it.`);
          this.picked.set(step.reply.id);
          this.catalogue.reload();
        } else this.sending.set({ name: file.name, ...step });
      },
      error: (error: unknown) => {
        this.sending.set(null);
        const problem = asProblem(error);
        if (problem.report) this.report.set(problem.report);
        else this.refusal.set(problem.words);
      },
    });
  }

  protected async release(version: CatalogueVersion): Promise<void> {
    const answer = await this.confirm.ask({
      title: `Release version ${version.number}?`,
      detail: 'New prices rest on it from now on; open quotes priced on another version become stale.',
      action: 'Release',
      note: 'optional',
    });
    if (answer !== null) await this.act(() => this.api.send(releaseCatalogueVersion, { params: { id: version.id }, body: { note: answer.note } }), 'Released.');
  }

  protected async withdraw(version: CatalogueVersion): Promise<void> {
    const answer = await this.confirm.ask({
      title: `Withdraw version ${version.number}?`,
      detail: 'Nothing can be priced on it any more; open quotes that rest on it become stale.',
      action: 'Withdraw',
      note: 'required',
      grave: true,
    });
    if (answer !== null) await this.act(() => this.api.send(withdrawCatalogueVersion, { params: { id: version.id }, body: { reason: answer.note } }), 'Withdrawn.');
  }

  private async act(call: () => ReturnType<Api['send']>, done: string): Promise<void> {
    this.refusal.set([]);
    try {
      await firstValueFrom(call());
      this.notices.done(done);
      this.catalogue.reload();
    } catch (error) {
      this.refusal.set(asProblem(error).words);
    }
  }
}
