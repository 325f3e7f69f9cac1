import { ChangeDetectionStrategy, Component, computed, inject, input, output } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import type { MoveOffer } from '@leanyear/contract/quotes';
import type { QuoteMove } from '@leanyear/vocabulary';
import { Confirm } from '../confirm/confirm';
import { Icon } from '../icon/icon';

export interface ChosenMove {
  readonly move: QuoteMove;
  readonly note: string;
}

/** Moves that end something for somebody: asked in words that say so, on a button that does not invite. */
const GRAVE: readonly QuoteMove[] = ['decline', 'withdraw', 'broker decline', 'return', 'lapse'];

/** The moves that the server offers now. One that is refused stays in sight with all its reasons. */
@Component({
  selector: 'ly-moves-bar',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Icon, MatButtonModule],
  templateUrl: './moves-bar.html',
  styleUrl: './moves-bar.scss',
})
export class MovesBar {
  private readonly confirm = inject(Confirm);
  readonly moves = input.required<readonly MoveOffer[]>();
  /** A move is under way: no second one meanwhile. */
  readonly busy = input(false);
  readonly chosen = output<ChosenMove>();

  protected readonly offered = computed(() => {
    const allowed = this.moves().filter((offer) => offer.allowed);
    const first = allowed.find((offer) => !GRAVE.includes(offer.move));
    return allowed.map((offer) => ({ offer, first: offer === first }));
  });
  protected readonly refused = computed(() =>
    this.moves().filter((offer) => !offer.allowed && offer.reasons.length > 0),
  );

  protected async choose(offer: MoveOffer): Promise<void> {
    const answer = await this.confirm.ask({
      title: `${offer.label}?`,
      action: offer.label,
      note: offer.needsNote ? 'required' : 'optional',
      grave: GRAVE.includes(offer.move),
    });
    if (answer !== null) this.chosen.emit({ move: offer.move, note: answer.note });
  }
}
