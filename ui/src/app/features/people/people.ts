import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'ly-people',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '<div class="page"><div class="page-head"><h1>People</h1></div></div>',
})
export class People {}
