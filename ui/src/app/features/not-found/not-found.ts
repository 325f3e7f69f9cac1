import { ChangeDetectionStrategy, Component } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { StatePanel } from '../../shared/state-panel/state-panel';

@Component({
  selector: 'ly-not-found',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [MatButtonModule, RouterLink, StatePanel],
  template: `
    <div class="page">
      <h1>No such page</h1>
      <div class="sheet">
        <ly-state-panel
          kind="missing"
          title="There is nothing at this address"
          detail="It may have moved, or the address has a slip in it."
        >
          <a mat-flat-button routerLink="/">Go to where you begin</a>
        </ly-state-panel>
      </div>
    </div>
  `,
})
export class NotFound {}
