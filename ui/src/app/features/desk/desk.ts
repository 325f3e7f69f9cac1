import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'ly-desk',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '<div class="page"><div class="page-head"><h1>Desk</h1></div></div>',
})
export class Desk {}
