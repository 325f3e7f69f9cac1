import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'ly-basis',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '<div class="page"><div class="page-head"><h1>House basis</h1></div></div>',
})
export class BasisPage {}
