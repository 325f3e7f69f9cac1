import { HttpContext } from '@angular/common/http';
import { inject, Injectable, Injector } from '@angular/core';
import { refreshSession } from '@leanyear/contract/session';
import { firstValueFrom } from 'rxjs';
import { Api } from './api';
import { asProblem } from './problem';
import { SessionStore } from './session';
import { RENEWED_AT, SIGN_IN } from './sign-in-context';

/** Renews an expired sign-in: once for all tabs, and over the page where only the password helps. */
@Injectable({ providedIn: 'root' })
export class Renewal {
  // Not injected: the client asks for this class while it is being made itself.
  private readonly injector = inject(Injector);
  private asking: Promise<boolean> | null = null;

  /**
   * Whether a request that began at `since` and was refused can be repeated. Tabs take turns: were two to show the same
   * refresh token, the second would look like a thief.
   */
  async renew(since: number, ask: boolean): Promise<boolean> {
    const renewed = await navigator.locks.request('leanyear.renewal', () => this.refresh(since));
    if (renewed) return true;
    if (!ask || this.injector.get(SessionStore).session() === null) return false;
    this.asking ??= this.askForPassword().finally(() => (this.asking = null));
    return this.asking;
  }

  private async refresh(since: number): Promise<boolean> {
    if (Number(localStorage.getItem(RENEWED_AT) ?? 0) > since) return true;
    try {
      const context = new HttpContext().set(SIGN_IN, 'none');
      const session = await firstValueFrom(this.injector.get(Api).send(refreshSession, { context }));
      this.injector.get(SessionStore).take(session);
      localStorage.setItem(RENEWED_AT, String(Date.now()));
      return true;
    } catch (error) {
      if (asProblem(error).status === 401) return false;
      throw error;
    }
  }

  private async askForPassword(): Promise<boolean> {
    const { signInAgain } = await import('./sign-in-again/sign-in-again');
    return signInAgain(this.injector);
  }
}
