import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'ly-audit',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '<div class="page"><div class="page-head"><h1>Audit trail</h1></div></div>',
})
export class Audit {}
