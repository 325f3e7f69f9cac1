import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'ly-referrals',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '<div class="page"><div class="page-head"><h1>Referrals</h1></div></div>',
})
export class Referrals {}
