import { ChangeDetectionStrategy, Component, computed, input, output } from '@angular/core';
import { AmountPipe, SharePipe } from '../format/pipes';
import { LAYER_COLOURS } from '../chart/ink';
import { towerBlocks, type TowerLayer } from './tower-blocks';

const HEIGHT = 300;
/** A block lower than this has no room for words; they stand in the list all the same. */
const WORDS_NEED = 30;
const LEFT = 60;
const WIDTH = 240;

/** The programme as a tower, to scale: each layer from its attachment up, the written line as its filled part. */
@Component({
  selector: 'ly-tower',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [AmountPipe, SharePipe],
  templateUrl: './tower.html',
  styleUrl: './tower.scss',
})
export class Tower {
  readonly layers = input.required<readonly TowerLayer[]>();
  readonly currency = input('');
  /** Key of the layer that is looked at. */
  readonly selected = input<string | null>(null);
  readonly chosen = output<string>();

  protected readonly height = HEIGHT;
  protected readonly left = LEFT;
  protected readonly viewBox = `0 -10 ${LEFT + WIDTH + 4} ${HEIGHT + 20}`;
  protected readonly blocks = computed(() => {
    const order = this.layers().map((layer) => layer.key);
    return towerBlocks(this.layers()).map((block) => {
      const width = WIDTH / block.columns;
      const height = Math.max(1, block.height * HEIGHT);
      return {
        ...block,
        x: LEFT + block.column * width,
        y: HEIGHT - block.bottom * HEIGHT - height,
        width: width - 3,
        pixels: height,
        words: height >= WORDS_NEED,
        colour: (order.indexOf(block.key) % LAYER_COLOURS) + 1,
      };
    });
  });
  /** Attachments and tops, the ones too near another left out. */
  protected readonly marks = computed(() => {
    const ends = this.layers().flatMap((layer) => [
      Number(layer.attachment) || 0,
      (Number(layer.attachment) || 0) + (Number(layer.limit) || 0),
    ]);
    const all = [...new Set([0, ...ends])].sort((a, b) => b - a);
    const top = all[0] || 1;
    const marks = all.map((amount) => ({ amount, y: HEIGHT - (amount / top) * HEIGHT }));
    return marks.filter(
      (mark, index) =>
        index === 0 || marks.slice(0, index).every((above) => mark.y - above.y >= 14 || above.y === mark.y),
    );
  });
  protected readonly description = computed(
    () => `Tower of ${this.layers().length} layers to scale; the list beside it names them.`,
  );
}
