import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'ly-quotes',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '<div class="page"><div class="page-head"><h1>Quotes</h1></div></div>',
})
export class Quotes {}
