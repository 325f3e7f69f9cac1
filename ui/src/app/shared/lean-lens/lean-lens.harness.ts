import { ComponentHarness, parallel } from '@angular/cdk/testing';

export class LeanLensHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-lean-lens';
  private readonly choices = this.locatorForAll('.layer');

  /** Names of the layers that are drawn. */
  async shown(): Promise<string[]> {
    const choices = await this.choices();
    const states = await parallel(() =>
      choices.map(async (choice) => ({
        name: await choice.text(),
        on: await choice.getAttribute('aria-pressed'),
      })),
    );
    return states.filter((state) => state.on === 'true').map((state) => state.name);
  }

  async toggle(layer: string): Promise<void> {
    for (const choice of await this.choices()) if ((await choice.text()) === layer) await choice.click();
  }

  async description(): Promise<string | null> {
    return (await this.locatorFor('.chart')()).getAttribute('aria-label');
  }

  /** Switches to the table and answers its rows, cells joined by ` | `. */
  async table(): Promise<string[]> {
    await (await this.locatorFor('[aria-label="Show the figures"]')()).click();
    const rows = await this.locatorForAll('tbody tr')();
    return parallel(() => rows.map(async (row) => (await row.text()).replace(/\s+/g, ' ')));
  }
}
