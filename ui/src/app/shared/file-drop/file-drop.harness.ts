import { ComponentHarness } from '@angular/cdk/testing';

export class FileDropHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-file-drop';

  async words(): Promise<string> {
    return (await this.locatorFor('div')()).text();
  }

  async drop(...files: readonly File[]): Promise<void> {
    await (await this.host()).dispatchEvent('drop', { dataTransfer: { files } as never });
  }
}
