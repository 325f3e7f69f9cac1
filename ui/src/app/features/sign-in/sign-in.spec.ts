import { Location } from '@angular/common';
import { provideHttpClient, withInterceptors } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { ChangeDetectionStrategy, Component } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { provideRouter, withComponentInputBinding } from '@angular/router';
import { RouterTestingHarness } from '@angular/router/testing';
import { problems } from '../../core/interceptors';
import { sessionOf } from '../../../testing/session';
import { SignIn } from './sign-in';
import { SignInHarness } from './sign-in.harness';

@Component({ changeDetection: ChangeDetectionStrategy.OnPush, template: 'inside' })
class Inside {}

/** Lets what waits for an answer go on. */
const settle = (): Promise<void> => new Promise((resolve) => setTimeout(resolve, 20));

async function open(url = '/sign-in', people: readonly object[] = []) {
  localStorage.clear();
  TestBed.configureTestingModule({
    providers: [
      provideHttpClient(withInterceptors([problems])),
      provideHttpClientTesting(),
      provideRouter(
        [
          { path: 'sign-in', component: SignIn },
          { path: '**', component: Inside },
        ],
        withComponentInputBinding(),
      ),
    ],
  });
  const server = TestBed.inject(HttpTestingController);
  const opening = RouterTestingHarness.create(url);
  // The page is not at rest before it knows whether there is a demo.
  await settle();
  server.expectOne('/api/v1/demo/accounts').flush(people);
  const router = await opening;
  const page = await TestbedHarnessEnvironment.loader(router.fixture).getHarness(SignInHarness);
  return { page, server, location: TestBed.inject(Location) };
}

describe('signing in', () => {
  it('goes on to where the person wanted to go', async () => {
    const { page, server, location } = await open('/sign-in?next=%2Fquotes%2F7%3Ftab%3Dlayers');
    await page.type('marit@leanyear.example', 'a long password');
    await page.submit();
    const call = server.expectOne('/api/v1/session');
    expect(call.request.body).toEqual({ email: 'marit@leanyear.example', password: 'a long password' });
    call.flush(sessionOf('underwriter'));
    await settle();
    expect(location.path()).toBe('/quotes/7?tab=layers');
  });

  it.each(['//evil.example', 'https://evil.example', '/\\evil.example'])(
    'never goes on to %s',
    async (elsewhere) => {
      const { page, server, location } = await open(`/sign-in?next=${encodeURIComponent(elsewhere)}`);
      await page.type('tom@brokers.example', 'a long password');
      await page.submit();
      server.expectOne('/api/v1/session').flush(sessionOf('broker'));
      await settle();
      expect(location.path()).toBe('/broker');
    },
  );

  it('says beside the fields what is missing, and asks the server nothing', async () => {
    const { page, server } = await open();
    await page.type('marit', '');
    await page.submit();
    expect(await page.faults()).toEqual([
      'This is not an e-mail address; one looks like name@firm.example.',
      'Enter your password.',
    ]);
    server.expectNone('/api/v1/session');
  });

  it('says that the account is locked, and for how long', async () => {
    const { page, server } = await open();
    await page.type('marit@leanyear.example', 'guess');
    await page.submit();
    server
      .expectOne('/api/v1/session')
      .flush(
        { detail: 'This account cannot be signed in to for now. Try again in 5 minutes.' },
        { status: 429, statusText: '' },
      );
    await settle();
    expect(await page.refusal()).toContain('Try again in 5 minutes.');
  });

  it('fills the form from the people of the demo', async () => {
    const { page } = await open('/sign-in', [
      {
        name: 'Marit Holm',
        email: 'marit@leanyear.example',
        role: 'underwriter',
        password: 'lean-and-plenty',
      },
    ]);
    expect(await page.people()).toEqual(['Marit Holm, underwriter']);
    await page.choose('Marit Holm, underwriter');
    expect(await page.typed()).toEqual(['marit@leanyear.example', 'lean-and-plenty']);
  });
});
