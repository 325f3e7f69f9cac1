import { ComponentHarness, parallel } from '@angular/cdk/testing';
import { MatMenuHarness } from '@angular/material/menu/testing';

export class ShellHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-shell';
  private readonly menus = this.locatorForAll(MatMenuHarness);

  async places(): Promise<string[]> {
    const places = await this.locatorForAll('nav a span')();
    return parallel(() => places.map((place) => place.text()));
  }

  async caution(): Promise<string> {
    const caution = await this.locatorForOptional('.caution')();
    return caution === null ? '' : caution.text();
  }

  async chooseTheme(label: string): Promise<void> {
    const [themes] = await this.menus();
    await themes?.clickItem({ text: new RegExp(label) });
  }

  async signOut(): Promise<void> {
    const [, person] = await this.menus();
    await person?.clickItem({ text: /Sign out/ });
  }
}
