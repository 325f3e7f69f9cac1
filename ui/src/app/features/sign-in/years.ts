import { ChangeDetectionStrategy, Component } from '@angular/core';

const COUNT = 84;

/** A run of years that looks drawn and is always the same: plenty rises slowly, lean comes at a stroke. */
function years(): { x: number; height: number; lean: boolean }[] {
  let state = 20_117;
  let plenty = 0.62;
  return Array.from({ length: COUNT }, (_, index) => {
    state = (Math.imul(state, 1_103_515_245) + 12_345) >>> 0;
    const chance = state / 4_294_967_296;
    const lean = chance < 0.13;
    plenty = lean ? plenty * (0.22 + chance * 2) : plenty + (0.92 - plenty) * 0.2;
    return { x: index + 0.5, height: Math.round(plenty * 960) / 10, lean: plenty < 0.4 };
  });
}

/** The picture on the sign-in page: years as strokes of a ledger, lean ones in ember. */
@Component({
  selector: 'ly-years',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: `
    <svg [attr.viewBox]="'0 0 ' + count + ' 100'" preserveAspectRatio="none" aria-hidden="true">
      @for (rule of rules; track rule) {
        <line class="rule" x1="0" [attr.x2]="count" [attr.y1]="rule" [attr.y2]="rule" />
      }
      @for (year of years; track year.x) {
        <line [class.lean]="year.lean" [attr.x1]="year.x" [attr.x2]="year.x" y1="100" [attr.y2]="100 - year.height" />
      }
    </svg>
  `,
  styles: `
    :host {
      display: block;
    }

    svg {
      display: block;
      width: 100%;
      height: 100%;
    }

    line {
      stroke: #5fb3b0;
      stroke-width: 2.5px;
      vector-effect: non-scaling-stroke;
    }

    .lean {
      stroke: #f49a78;
    }

    .rule {
      stroke: var(--ly-night-rule);
      stroke-width: 1px;
    }
  `,
})
export class Years {
  protected readonly count = COUNT;
  protected readonly years = years();
  protected readonly rules = [20, 40, 60, 80];
}
