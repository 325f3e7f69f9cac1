import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { SessionStore } from '../../core/session';
import { StatePanel } from '../../shared/state-panel/state-panel';

@Component({
  selector: 'ly-forbidden',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [MatButtonModule, RouterLink, StatePanel],
  template: `
    <div class="page">
      <h1>Not open to you</h1>
      <div class="sheet">
        <ly-state-panel kind="forbidden" [detail]="detail">
          <a mat-flat-button routerLink="/">Go to where you begin</a>
        </ly-state-panel>
      </div>
    </div>
  `,
})
export class Forbidden {
  private readonly person = inject(SessionStore).person();
  protected readonly detail = `You are signed in as ${this.person?.name ?? 'nobody'}, in the role of ${this.person?.role ?? 'visitor'}, which does not include this page. A senior or the administrator can say who has it.`;
}
