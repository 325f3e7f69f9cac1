import { ComponentHarness } from '@angular/cdk/testing';

export class StateChipHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-state-chip';

  async words(): Promise<string> {
    return (await this.locatorFor('span')()).text();
  }

  async tone(): Promise<string | null> {
    return (await this.host()).getAttribute('data-tone');
  }
}
