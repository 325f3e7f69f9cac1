import { ChangeDetectionStrategy, Component } from '@angular/core';

const COUNT = 72;

interface Year {
  readonly x: number;
  readonly height: number;
  readonly lean: boolean;
}

/** A run of years that looks drawn and is always the same: plenty comes slowly, lean years at a stroke. */
function years(): Year[] {
  let state = 90_210;
  const chance = (): number => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
    return state / 4_294_967_296;
  };
  let store = 0.6;
  return Array.from({ length: COUNT }, (_, index) => {
    const lean = chance() < 0.09;
    store = lean ? store * (0.12 + 0.4 * chance()) : store + (1 - store) * 0.11;
    const height = store * (0.78 + 0.22 * chance());
    return { x: index + 0.5, height: Math.round(height * 1000) / 10, lean: store < 0.36 };
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
        <line
          [class.lean]="year.lean"
          [attr.x1]="year.x"
          [attr.x2]="year.x"
          y1="100"
          [attr.y2]="100 - year.height"
        />
      }
    </svg>
  `,
  styles: `
    :host {
      display: block;
      position: relative;
    }

    svg {
      position: absolute;
      inset: 0;
      width: 100%;
      height: 100%;
    }

    line {
      stroke: #5fb3b0;
      stroke-width: 2px;
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
