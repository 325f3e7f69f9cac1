import { ComponentHarness, parallel } from '@angular/cdk/testing';

export class SplitWaterfallHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-split-waterfall';

  /** The first line of each row's heading, in order. */
  async parts(): Promise<(string | null)[]> {
    const rows = await this.locatorForAll('tbody tr')();
    return parallel(() => rows.map((row) => row.getAttribute('data-part')));
  }
}
