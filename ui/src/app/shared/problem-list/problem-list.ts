import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import type { FileReport } from '@leanyear/contract/files';
import { LOCALE } from '../../core/locale';
import { downloadCsv } from '../csv/csv';
import { figure } from '../format/numbers';
import { Icon } from '../icon/icon';

/** Shown at once; the rest is in the download. */
const SHOWN = 200;

/** Why a file was refused: every problem at its line and column, with the value and what would be right. */
@Component({
  selector: 'ly-problem-list',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Icon, MatButtonModule],
  templateUrl: './problem-list.html',
  styleUrl: './problem-list.scss',
})
export class ProblemList {
  private readonly locale = inject(LOCALE);
  readonly report = input.required<FileReport>();

  protected readonly shown = computed(() => this.report().problems.slice(0, SHOWN));
  protected readonly summary = computed(() => {
    const { problemCount, rows, fileName } = this.report();
    const problems =
      new Intl.PluralRules(this.locale).select(problemCount) === 'one' ? 'problem' : 'problems';
    return `${figure(problemCount, this.locale)} ${problems} in ${figure(rows, this.locale)} rows of ${fileName}. Nothing of it was kept.`;
  });
  protected readonly beyond = computed(() => {
    const { problemCount, problems } = this.report();
    if (problemCount <= this.shown().length) return '';
    const words = `The first ${figure(this.shown().length, this.locale)} are shown`;
    return problems.length > this.shown().length
      ? `${words}; the first ${figure(problems.length, this.locale)} can be downloaded.`
      : `${words}.`;
  });

  protected save(): void {
    const { fileName, problems } = this.report();
    const rows = problems.map((one) => [one.line, one.column, one.value, one.message]);
    downloadCsv(`problems of ${fileName.replace(/\.\w+$/, '')}.csv`, [
      ['line', 'column', 'value', 'problem'],
      ...rows,
    ]);
  }
}
