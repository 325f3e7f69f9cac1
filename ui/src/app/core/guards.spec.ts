import { Location } from '@angular/common';
import { ChangeDetectionStrategy, Component } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { provideHttpClient } from '@angular/common/http';
import { provideRouter, type Routes } from '@angular/router';
import { RouterTestingHarness } from '@angular/router/testing';
import type { Role } from '@leanyear/vocabulary';
import { sessionOf } from '../../testing/session';
import { homeOf, may, signedIn } from './guards';
import { SessionStore } from './session';

@Component({ changeDetection: ChangeDetectionStrategy.OnPush, template: 'open' })
class Open {}
@Component({ changeDetection: ChangeDetectionStrategy.OnPush, template: 'sign in' })
class SignInPage {}
@Component({ changeDetection: ChangeDetectionStrategy.OnPush, template: 'forbidden' })
class ForbiddenPage {}

const routes: Routes = [
  { path: 'sign-in', component: SignInPage },
  { path: 'forbidden', component: ForbiddenPage },
  { path: 'audit', canActivate: [signedIn, may('audit.read')], component: Open },
];

async function visit(role: Role | null) {
  localStorage.clear();
  TestBed.configureTestingModule({ providers: [provideRouter(routes), provideHttpClient()] });
  if (role !== null) TestBed.inject(SessionStore).take(sessionOf(role));
  const harness = await RouterTestingHarness.create('/audit?find=x');
  return { text: harness.routeNativeElement?.textContent, path: TestBed.inject(Location).path() };
}

describe('the way to a page', () => {
  it('is open to those who may', async () => {
    expect(await visit('administrator')).toEqual({ text: 'open', path: '/audit?find=x' });
  });

  it('ends in words, at the same address, for those who may not', async () => {
    expect(await visit('underwriter')).toEqual({ text: 'forbidden', path: '/audit?find=x' });
  });

  it('leads through the sign-in and back', async () => {
    expect(await visit(null)).toEqual({ text: 'sign in', path: '/sign-in?next=%2Faudit%3Ffind%3Dx' });
  });

  it('begins at the desk, for brokers at their quotations', () => {
    expect(homeOf(sessionOf('actuary'))).toBe('/desk');
    expect(homeOf(sessionOf('broker'))).toBe('/broker');
  });
});
