import { ComponentHarness } from '@angular/cdk/testing';

export class PercentFieldHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-percent-field';
  private readonly input = this.locatorFor('input');

  async type(text: string): Promise<void> {
    const input = await this.input();
    await input.clear();
    await input.sendKeys(text);
    await input.blur();
  }

  async shown(): Promise<string> {
    return (await this.input()).getProperty<string>('value');
  }

  async fault(): Promise<string> {
    const error = await this.locatorForOptional('mat-error')();
    return error === null ? '' : error.text();
  }
}
