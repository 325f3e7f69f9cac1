import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'ly-broker',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '<div class="page"><div class="page-head"><h1>Quotations</h1></div></div>',
})
export class BrokerHome {}
