import { provideHttpClient } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { ChangeDetectionStrategy, Component } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { provideRouter } from '@angular/router';
import { RouterTestingHarness } from '@angular/router/testing';
import type { Role } from '@leanyear/vocabulary';
import { sessionOf } from '../../testing/session';
import { RELOAD } from '../core/reload';
import { SessionStore } from '../core/session';
import { Shell } from './shell';
import { ShellHarness } from './shell.harness';

@Component({ changeDetection: ChangeDetectionStrategy.OnPush, template: '<h1>A page</h1>' })
class Page {}

const reload = jest.fn();

async function open(role: Role, url = '/quotes') {
  localStorage.clear();
  window.matchMedia = () => ({ matches: false, addEventListener: jest.fn() }) as unknown as MediaQueryList;
  const children = [
    { path: 'quotes', component: Page, data: { prices: true } },
    { path: 'people', component: Page },
  ];
  TestBed.configureTestingModule({
    providers: [
      { provide: RELOAD, useValue: reload },
      provideHttpClient(),
      provideHttpClientTesting(),
      provideRouter([
        { path: 'sign-in', component: Page },
        { path: '', component: Shell, children },
      ]),
    ],
  });
  TestBed.inject(SessionStore).take(sessionOf(role));
  const router = await RouterTestingHarness.create(url);
  return { router, shell: await TestbedHarnessEnvironment.loader(router.fixture).getHarness(ShellHarness) };
}

describe('the frame around the pages', () => {
  it.each([
    [
      'underwriter',
      ['Desk', 'Submissions', 'Quotes', 'Book', 'House basis', 'Event catalogues', 'Post room', 'People'],
    ],
    ['broker', ['Quotations']],
    ['administrator', ['Desk', 'Post room', 'People', 'Audit trail']],
  ] as const)('shows a person in the role of %s where they may go', async (role, places) => {
    const { shell } = await open(role);
    expect(await shell.places()).toEqual(places);
  });

  it('says the cautions where prices are shown, and not elsewhere', async () => {
    const { router, shell } = await open('underwriter');
    expect(await shell.caution()).toContain('not an actuarial opinion');
    await router.navigateByUrl('/people');
    expect(await shell.caution()).toBe('');
  });

  it('keeps the theme that is chosen', async () => {
    const { shell } = await open('underwriter');
    await shell.chooseTheme('Dark');
    expect(document.documentElement.dataset['theme']).toBe('dark');
    expect(localStorage.getItem('leanyear.theme')).toBe('dark');
    await shell.chooseTheme('As the system');
    expect(document.documentElement.dataset['theme']).toBeUndefined();
  });

  it('loads again when somebody else signs in, in another tab', async () => {
    await open('underwriter');
    const keep = (newValue: string): boolean =>
      window.dispatchEvent(new StorageEvent('storage', { key: 'leanyear.signed-in', newValue }));
    keep(sessionOf('underwriter').person.id);
    expect(reload).not.toHaveBeenCalled();
    keep('somebody-else');
    expect(reload).toHaveBeenCalledTimes(1);
  });

  it('signs out', async () => {
    const { router, shell } = await open('underwriter');
    await shell.signOut();
    TestBed.inject(HttpTestingController).expectOne({ method: 'DELETE', url: '/api/v1/session' }).flush(null);
    await router.fixture.whenStable();
    expect(TestBed.inject(SessionStore).session()).toBeNull();
  });
});
