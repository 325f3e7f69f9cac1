import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'ly-catalogues',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '<div class="page"><div class="page-head"><h1>Event catalogues</h1></div></div>',
})
export class Catalogues {}
