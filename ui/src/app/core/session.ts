import { computed, inject, Injectable, signal } from '@angular/core';
import { HttpContext } from '@angular/common/http';
import { readSession, signIn, signOut, type Session } from '@leanyear/contract/session';
import type { Permission } from '@leanyear/vocabulary';
import { firstValueFrom } from 'rxjs';
import { Api } from './api';
import { asProblem } from './problem';
import { SIGN_IN } from './sign-in-context';

/** Remembers in this browser that somebody signed in, so that a first visit asks the server nothing. */
const HINT = 'leanyear.signed-in';

/** Who is signed in, and what they may do. The cookies that prove it are never seen by scripts. */
@Injectable({ providedIn: 'root' })
export class SessionStore {
  private readonly api = inject(Api);
  private readonly current = signal<Session | null>(null);
  private loading: Promise<Session | null> | null = null;

  readonly session = this.current.asReadonly();
  readonly person = computed(() => this.current()?.person ?? null);
  private readonly permissions = computed(() => new Set<Permission>(this.current()?.permissions ?? []));

  may(permission: Permission): boolean {
    return this.permissions().has(permission);
  }

  /** The session of the cookies, asked for once; null for nobody. */
  load(): Promise<Session | null> {
    if (localStorage.getItem(HINT) === null) return Promise.resolve(this.current());
    this.loading ??= this.read();
    return this.loading;
  }

  async signIn(email: string, password: string): Promise<Session> {
    const context = new HttpContext().set(SIGN_IN, 'none');
    return this.take(await firstValueFrom(this.api.send(signIn, { body: { email, password }, context })));
  }

  async signOut(): Promise<void> {
    await firstValueFrom(this.api.send(signOut, { context: new HttpContext().set(SIGN_IN, 'none') }));
    this.forget();
  }

  /** Asks who is signed in, which renews an expired sign-in on the way. */
  async check(): Promise<void> {
    await firstValueFrom(this.api.send(readSession, { context: new HttpContext().set(SIGN_IN, 'renew') }));
  }

  /** Whether what another tab has just kept says that somebody else signed in there: the cookies are theirs now. */
  isSomebodyElse(event: StorageEvent): boolean {
    const person = this.person();
    return event.key === HINT && event.newValue !== null && person !== null && event.newValue !== person.id;
  }

  take(session: Session): Session {
    localStorage.setItem(HINT, session.person.id);
    this.current.set(session);
    this.loading = Promise.resolve(session);
    return session;
  }

  forget(): void {
    localStorage.removeItem(HINT);
    this.current.set(null);
    this.loading = null;
  }

  private async read(): Promise<Session | null> {
    try {
      const context = new HttpContext().set(SIGN_IN, 'renew');
      return this.take(await firstValueFrom(this.api.send(readSession, { context })));
    } catch (error) {
      this.loading = null;
      if (asProblem(error).status !== 401) throw error;
      this.forget();
      return null;
    }
  }
}
