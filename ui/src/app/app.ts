import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { RouterOutlet } from '@angular/router';
import { NoticeList } from './core/notice-list/notice-list';
import { ThemeChoice } from './core/theme-choice';
import { DeskTitle } from './core/title';

@Component({
  selector: 'app-root',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [NoticeList, RouterOutlet],
  template: `
    <p class="unseen" aria-live="polite">{{ title.page() }}</p>
    <router-outlet />
    <ly-notice-list />
  `,
})
export class App {
  protected readonly title = inject(DeskTitle);

  constructor() {
    // Made with the page, so that the chosen theme is there before anything is drawn.
    inject(ThemeChoice);
  }
}
