import { ComponentHarness, parallel } from '@angular/cdk/testing';

const tidy = (text: string): string => text.replace(/\s+/g, ' ').trim();

export class SignInHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-sign-in';
  private readonly inputs = this.locatorForAll('form input');
  private readonly accounts = this.locatorForAll('ly-demo-accounts button');

  async type(...values: readonly string[]): Promise<void> {
    const inputs = await this.inputs();
    for (const [index, value] of values.entries()) {
      await inputs[index]?.clear();
      if (value !== '') await inputs[index]?.sendKeys(value);
    }
  }

  async typed(): Promise<string[]> {
    const inputs = await this.inputs();
    return parallel(() => inputs.map((input) => input.getProperty<string>('value')));
  }

  async submit(): Promise<void> {
    await (await this.locatorFor('button[type=submit]')()).click();
  }

  async faults(): Promise<string[]> {
    const errors = await this.locatorForAll('mat-error')();
    return parallel(() => errors.map((error) => error.text()));
  }

  async refusal(): Promise<string> {
    return tidy(await (await this.locatorFor('.refusal')()).text());
  }

  async people(): Promise<string[]> {
    const words = await this.locatorForAll('ly-demo-accounts button span')();
    const texts = await parallel(() => words.map((word) => word.text()));
    return Array.from({ length: texts.length / 2 }, (_, index) =>
      texts.slice(index * 2, index * 2 + 2).join(', '),
    );
  }

  async choose(person: string): Promise<void> {
    await (await this.accounts())[(await this.people()).indexOf(person)]?.click();
  }
}
