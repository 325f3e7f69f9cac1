import { ComponentHarness } from '@angular/cdk/testing';

/** The question for the password over a page; find it from the document's root. */
export class SignInAgainHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-sign-in-again';

  async signIn(password: string): Promise<void> {
    await (await this.locatorFor('input[type=password]')()).sendKeys(password);
    await (await this.locatorFor('button[type=submit]')()).click();
  }

  async refusal(): Promise<string> {
    const refusal = await this.locatorForOptional('.refusal')();
    return refusal === null ? '' : refusal.text();
  }

  async leave(): Promise<void> {
    await (await this.locatorFor('button[type=button]')()).click();
  }
}
