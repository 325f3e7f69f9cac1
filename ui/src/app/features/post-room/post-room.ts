import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'ly-post-room',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '<div class="page"><div class="page-head"><h1>Post room</h1></div></div>',
})
export class PostRoom {}
