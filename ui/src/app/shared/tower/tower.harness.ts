import { ComponentHarness, parallel } from '@angular/cdk/testing';

export class TowerHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-tower';

  /** The layers in words, from the ground up. */
  async layers(): Promise<string[]> {
    const items = await this.locatorForAll('li')();
    return parallel(() => items.map((item) => item.text()));
  }
}
