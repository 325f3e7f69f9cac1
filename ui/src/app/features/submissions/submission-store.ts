import { computed, inject, Injectable, signal } from '@angular/core';
import { listProgrammes } from '@leanyear/contract/programmes';
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

  reload(): void {
    this.submission.reload();
    this.tables.reload();
    this.programmes.reload();
  }
}
