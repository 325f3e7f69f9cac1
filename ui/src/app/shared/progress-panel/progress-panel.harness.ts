import { ComponentHarness } from '@angular/cdk/testing';

export class ProgressPanelHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-progress-panel';

  async words(): Promise<string> {
    return (await this.locatorFor('.words')()).text();
  }

  async cancel(): Promise<void> {
    await (await this.locatorFor('button')()).click();
  }
}
