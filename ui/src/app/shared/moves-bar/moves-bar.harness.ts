import { ComponentHarness, type TestElement } from '@angular/cdk/testing';

async function texts(elements: Promise<TestElement[]>): Promise<string[]> {
  return Promise.all((await elements).map((element) => element.text()));
}

export class MovesBarHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-moves-bar';
  private readonly buttons = this.locatorForAll('.offered button');

  offered(): Promise<string[]> {
    return texts(this.buttons());
  }

  /** Every reason for which some move is refused. */
  reasons(): Promise<string[]> {
    return texts(this.locatorForAll('.refused li')());
  }

  async choose(label: string): Promise<void> {
    const labels = await this.offered();
    const button = (await this.buttons())[labels.indexOf(label)];
    if (button === undefined) throw new Error(`No move is called ${label}; there are ${labels.join(', ')}.`);
    await button.click();
  }
}
