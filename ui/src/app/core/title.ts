import { inject, Injectable, signal } from '@angular/core';
import { Title } from '@angular/platform-browser';
import { TitleStrategy, type RouterStateSnapshot } from '@angular/router';

/** The tab says the page first and the house last; pages about one thing name it with `name`. */
@Injectable({ providedIn: 'root' })
export class DeskTitle extends TitleStrategy {
  private readonly title = inject(Title);
  private readonly shownPage = signal('');
  /** The page's title, read aloud after every change of page. */
  readonly page = this.shownPage.asReadonly();

  override updateTitle(state: RouterStateSnapshot): void {
    this.name(this.buildTitle(state) ?? '');
  }

  /** Names the page once what it shows is known. */
  name(page: string): void {
    this.shownPage.set(page);
    this.title.setTitle(page === '' ? 'Leanyear' : `${page} · Leanyear`);
  }
}
