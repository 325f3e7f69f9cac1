import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { listBases } from '@leanyear/contract/house';
import { Api } from '../../core/api';
import { Amount } from '../../shared/amount/amount';
import { FigurePipe, MomentPipe, SharePipe } from '../../shared/format/pipes';
import { StateChip } from '../../shared/state-chip/state-chip';
import { StatePanel } from '../../shared/state-panel/state-panel';

/** What the house prices on, to read. */
@Component({
  selector: 'ly-basis',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Amount, FigurePipe, MomentPipe, SharePipe, StateChip, StatePanel],
  template: `
    <div class="page">
      <div class="page-head">
        <div>
          <h1>House basis</h1>
          <p>How the house weighs a bad year, and what it adds. Every price rests on the released one.</p>
        </div>
      </div>
      @if (bases.hasValue()) {
        @for (basis of bases.value(); track basis.id) {
          @let it = basis.terms;
          <section class="sheet" [attr.aria-labelledby]="basis.id">
            <div class="row">
              <h2 [id]="basis.id">Basis {{ basis.number }}</h2>
              <ly-state-chip [state]="basis.state" />
              <span class="soft">{{ basis.createdBy.name }}{{ basis.releasedAt ? ', released ' + (basis.releasedAt | moment) : '' }}</span>
            </div>
            <dl class="facts">
              <dt>Capital</dt>
              <dd><ly-amount [value]="it.capital" [currency]="it.currency" /></dd>
              <dt>Risk aversion</dt>
              <dd>{{ it.riskAversion }} <span class="soft">how much dearer a unit becomes as capital falls</span></dd>
              <dt>Discounting</dt>
              <dd>
                @if (it.discounting.mode === 'anchored') {
                  anchored to a riskless rate of {{ it.discounting.risklessRate | share }}
                } @else {
                  stated: {{ it.discounting.discountFactor }}
                }
              </dd>
              <dt>Return on own assets</dt>
              <dd>{{ it.returnOnAssets === null ? 'the riskless rate' : (it.returnOnAssets | share) }}</dd>
              <dt>Floor</dt>
              <dd>{{ it.floor | share }} of capital <span class="soft">below it a unit becomes no dearer</span></dd>
              <dt>Target margin</dt>
              <dd>{{ it.targetMargin | share }} on the walk-away premium</dd>
              <dt>Minimum rate on line</dt>
              <dd>{{ it.minimumRateOnLine | share }}</dd>
              <dt>Taxes, variable expense</dt>
              <dd>{{ it.taxes | share }}, {{ it.variableExpense | share }} of premium</dd>
              <dt>Loss adjustment expense</dt>
              <dd>{{ it.lossAdjustment | share }} of recoveries</dd>
              <dt>Fixed expense of a contract</dt>
              <dd><ly-amount [value]="it.fixedExpensePerContract" [currency]="it.currency" /></dd>
              <dt>Attritional loss and outward cost</dt>
              <dd><ly-amount [value]="it.attritionalAndOutward" [currency]="it.currency" /></dd>
              @for (rate of ratesOf(it.exchangeRates); track rate[0]) {
                <dt>One {{ rate[0] }}</dt>
                <dd class="figures">{{ rate[1] }} {{ it.currency }}</dd>
              }
              <dt>Grid</dt>
              <dd>{{ it.grid.states | figure }} simulated years, seed <span class="figures">{{ it.grid.seed }}</span></dd>
            </dl>
          </section>
        } @empty {
          <ly-state-panel title="No basis yet" detail="Nothing can be priced before an actuary has released one." />
        }
      } @else {
        <ly-state-panel [of]="bases" (again)="bases.reload()" />
      }
    </div>
  `,
})
export class BasisPage {
  protected readonly bases = inject(Api).resource(listBases, () => ({}));

  protected ratesOf(rates: Readonly<Record<string, number>>): [string, number][] {
    return Object.entries(rates);
  }
}
