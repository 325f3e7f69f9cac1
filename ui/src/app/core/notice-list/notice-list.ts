import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { Icon } from '../../shared/icon/icon';
import { Notices, type Notice } from '../notices';

@Component({
  selector: 'ly-notice-list',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Icon, MatButtonModule],
  templateUrl: './notice-list.html',
  styleUrl: './notice-list.scss',
  host: { class: 'unprinted' },
})
export class NoticeList {
  private readonly notices = inject(Notices);
  protected readonly shown = this.notices.shown;

  protected close(notice: Notice): void {
    this.notices.close(notice.id);
  }

  protected act(notice: Notice): void {
    notice.action?.act();
    this.close(notice);
  }
}
