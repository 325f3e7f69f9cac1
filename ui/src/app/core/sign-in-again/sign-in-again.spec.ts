import { provideHttpClient, withInterceptors } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { ChangeDetectionStrategy, Component, Injector } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { provideRouter, Router } from '@angular/router';
import { sessionOf } from '../../../testing/session';
import { problems } from '../interceptors';
import { SessionStore } from '../session';
import { RENEWED_AT } from '../sign-in-context';
import { signInAgain } from './sign-in-again';
import { SignInAgainHarness } from './sign-in-again.harness';

@Component({ changeDetection: ChangeDetectionStrategy.OnPush, template: 'page' })
class Page {}

const settle = (): Promise<void> => new Promise((resolve) => setTimeout(resolve, 20));

async function open() {
  localStorage.clear();
  TestBed.configureTestingModule({
    providers: [
      provideHttpClient(withInterceptors([problems])),
      provideHttpClientTesting(),
      provideRouter([{ path: '**', component: Page }]),
    ],
  });
  TestBed.inject(SessionStore).take(sessionOf('underwriter'));
  const fixture = TestBed.createComponent(Page);
  const answer = signInAgain(TestBed.inject(Injector));
  const dialog = await TestbedHarnessEnvironment.documentRootLoader(fixture).getHarness(SignInAgainHarness);
  return { answer, dialog, server: TestBed.inject(HttpTestingController) };
}

describe('signing in again over a page', () => {
  it('signs in the same person, after a slip too', async () => {
    const { answer, dialog, server } = await open();
    await dialog.signIn('slip');
    server
      .expectOne('/api/v1/session')
      .flush({ detail: 'E-mail and password do not fit together.' }, { status: 401, statusText: '' });
    await settle();
    expect(await dialog.refusal()).toBe('E-mail and password do not fit together.');
    await dialog.signIn('right');
    const call = server.expectOne('/api/v1/session');
    expect(call.request.body).toEqual({ email: 'marit@leanyear.example', password: 'right' });
    call.flush(sessionOf('underwriter'));
    expect(await answer).toBe(true);
    expect(localStorage.getItem(RENEWED_AT)).not.toBeNull();
  });

  it('goes by itself when another tab has signed in', async () => {
    const { answer } = await open();
    window.dispatchEvent(new StorageEvent('storage', { key: RENEWED_AT, newValue: '1' }));
    expect(await answer).toBe(true);
  });

  it('can be left, for the sign-in page', async () => {
    const { answer, dialog } = await open();
    await dialog.leave();
    expect(await answer).toBe(false);
    expect(TestBed.inject(Router).url).toBe('/sign-in');
    expect(TestBed.inject(SessionStore).session()).toBeNull();
  });
});
