import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'ly-broker-link',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '<main class="page"><h1>Quotation</h1></main>',
})
export class BrokerLink {}
