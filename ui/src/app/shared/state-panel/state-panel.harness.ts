import { ComponentHarness, parallel } from '@angular/cdk/testing';

export class StatePanelHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-state-panel';

  async kind(): Promise<string | null> {
    return (await this.host()).getAttribute('data-kind');
  }

  async words(): Promise<string> {
    const lines = await this.locatorForAll('p')();
    return (await parallel(() => lines.map((line) => line.text()))).join(' ').replace(/\s+/g, ' ').trim();
  }

  async tryAgain(): Promise<void> {
    await (await this.locatorFor('.actions button')()).click();
  }
}
