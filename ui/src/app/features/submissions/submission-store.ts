import { computed, inject, Injectable, signal } from '@angular/core';
import { listProgrammes, type Programme } from '@leanyear/contract/programmes';
import { listLossTables, readSubmission } from '@leanyear/contract/submissions';
import { Api } from '../../core/api';

/** What the pages of one submission share. */
@Injectable()
export class SubmissionStore {
  private readonly api = inject(Api);
  readonly id = signal<string | undefined>(undefined);
  private readonly args = computed(() => {
    const id = this.id();
    return id === undefined ? undefined : { params: { id } };
  });
  readonly submission = this.api.resource(readSubmission, () => this.args());
  readonly tables = this.api.resource(listLossTables, () => this.args());
  readonly programmes = this.api.resource(listProgrammes, () => this.args());

  /** Takes in a programme as it was just saved, so that nothing is done on an older list meanwhile. */
  keep(saved: Programme): void {
    this.programmes.update((list) => [...(list ?? []).filter((one) => one.id !== saved.id), saved]);
  }

  /** The programme the address names, else the first; null while there is none such. */
  programmeAt(id: string | undefined): Programme | null {
    const all = this.programmes.hasValue() ? this.programmes.value() : [];
    return (id === undefined ? all[0] : all.find((one) => one.id === id)) ?? null;
  }

  reload(): void {
    this.submission.reload();
    this.tables.reload();
    this.programmes.reload();
  }
}
