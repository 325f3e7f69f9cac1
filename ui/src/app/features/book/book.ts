import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'ly-book',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '<div class="page"><div class="page-head"><h1>Book</h1></div></div>',
})
export class BookPage {}
