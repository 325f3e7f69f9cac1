import request from 'supertest';
import type { RouteSpec } from '../../api/contract/route';
import { ROUTES } from '../../api/contract/routes';
import { PERMISSIONS, PERMISSIONS_OF, ROLES, type Role } from '../../api/domain/vocabulary';
import { openTestApi, type TestApi, type TestPerson } from '../support/api';

const NOBODY = '00000000-0000-4000-8000-000000000000';
const entries = Object.entries(ROUTES).filter(([, spec]) => spec.form !== 'stream');
const pathOf = (spec: RouteSpec): string => spec.path.replace(/:\w+/g, NOBODY);

/** What the vocabulary says of a role and a route. */
function may(role: Role, spec: RouteSpec): boolean {
  if (spec.access === 'public' || spec.access === 'link' || spec.access === 'signed in') return true;
  return PERMISSIONS_OF[role].includes(spec.access);
}

describe('who may what', () => {
  let api: TestApi;
  const people = new Map<Role, TestPerson>();
  beforeAll(async () => {
    api = await openTestApi();
    for (const role of ROLES) people.set(role, await api.person(role));
  });
  afterAll(() => api.close());

  it('binds every route of the contract', () => expect(api.unbound).toEqual([]));

  it('declares an access for every route, and gives every permission to a role and a route', () => {
    const declared = new Set(Object.values(ROUTES).map((spec) => spec.access));
    for (const permission of PERMISSIONS) {
      expect({ permission, used: declared.has(permission) }).toEqual({ permission, used: true });
      expect(ROLES.filter((role) => PERMISSIONS_OF[role].includes(permission))).not.toEqual([]);
    }
  });

  const closed = entries.filter(([, spec]) => spec.access !== 'public' && spec.access !== 'link');
  it.each(closed)('%s wants a sign-in', async (_name, spec) => {
    const res = await request(api.express)[spec.method](`/api/v1${pathOf(spec)}`);
    expect(res.status).toBe(401);
    expect(res.type).toBe('application/problem+json');
  });

  // Ending the own session would end what the other rows use.
  const harmless = closed.filter(([, spec]) => spec.path !== '/tokens');
  it.each(harmless.flatMap(([name, spec]) => ROLES.map((role) => [name, role, may(role, spec) ? 'yes' : 'no', spec] as const)))(
    '%s, %s: %s',
    async (_name, role, allowed, spec) => {
      const person = people.get(role);
      if (person === undefined) throw new Error('no such person');
      const res = await person.as(spec.method, pathOf(spec)).set('If-Match', '"1"');
      if (allowed === 'no') expect(res.status).toBe(403);
      else {
        // Whatever is answered to an empty request for a thing that does not exist, it is neither refusal nor fault.
        expect([401, 403]).not.toContain(res.status);
        expect(res.status).toBeLessThan(500);
      }
    },
  );
});
