import { ChangeDetectionStrategy, Component, computed, inject, input, output } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatProgressBarModule } from '@angular/material/progress-bar';
import { LOCALE } from '../../core/locale';
import { lasting } from '../format/dates';

/** Below this share the pace says nothing yet about how long it will take. */
const TOO_EARLY = 0.03;

/** Long work: what is being done, how far, about how long, and a way to stop it. */
@Component({
  selector: 'ly-progress-panel',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [MatButtonModule, MatProgressBarModule],
  templateUrl: './progress-panel.html',
  styleUrl: './progress-panel.scss',
})
export class ProgressPanel {
  private readonly locale = inject(LOCALE);
  readonly doing = input.required<string>();
  readonly done = input(0);
  /** 0 while nobody knows how much there is. */
  readonly total = input(0);
  /** When it began, as an ISO time; null where it waits. */
  readonly startedAt = input<string | null>(null);
  readonly cancellable = input(true);
  readonly cancelling = input(false);
  readonly cancelled = output();

  protected readonly share = computed(() => (this.total() > 0 ? Math.min(1, this.done() / this.total()) : 0));
  protected readonly known = computed(() => this.total() > 0);
  protected readonly remaining = computed(() => {
    const share = this.share();
    const startedAt = this.startedAt();
    if (startedAt === null || share < TOO_EARLY || share >= 1) return '';
    const elapsed = (Date.now() - new Date(startedAt).getTime()) / 1000;
    return elapsed > 0 ? `about ${lasting((elapsed / share) * (1 - share), this.locale)} more` : '';
  });
  protected readonly percent = computed(() => `${Math.floor(this.share() * 100)}%`);
}
