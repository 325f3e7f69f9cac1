import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'ly-submissions',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '<div class="page"><div class="page-head"><h1>Submissions</h1></div></div>',
})
export class Submissions {}
