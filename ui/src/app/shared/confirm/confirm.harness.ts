import { ComponentHarness } from '@angular/cdk/testing';

/** The open question; find it from the document's root. */
export class ConfirmHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-confirm-dialog';

  async title(): Promise<string> {
    return (await this.locatorFor('[mat-dialog-title]')()).text();
  }

  async write(note: string): Promise<void> {
    await (await this.locatorFor('textarea')()).sendKeys(note);
  }

  async confirm(): Promise<void> {
    await (await this.locatorFor('button[type=submit]')()).click();
  }

  async cancel(): Promise<void> {
    await (await this.locatorFor('button[type=button]')()).click();
  }

  async fault(): Promise<string> {
    const error = await this.locatorForOptional('mat-error')();
    return error === null ? '' : error.text();
  }
}
