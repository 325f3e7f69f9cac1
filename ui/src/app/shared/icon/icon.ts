import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/** An icon of the shipped set (fonts/icons.txt). It only illustrates: the words beside it, or a label, say the same. */
@Component({
  selector: 'ly-icon',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: '{{ name() }}',
  host: { 'aria-hidden': 'true', class: 'notranslate' },
  styles: `
    :host {
      display: inline-block;
      flex: none;
      overflow: hidden;
      width: 1em;
      height: 1em;
      font: 400 1.25rem/1 var(--ly-icons);
      font-feature-settings: 'liga';
      letter-spacing: normal;
      text-transform: none;
      white-space: nowrap;
      vertical-align: -0.25em;
      user-select: none;
    }
  `,
})
export class Icon {
  readonly name = input.required<string>();
}
