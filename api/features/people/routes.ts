import {
  createCedant,
  createContact,
  createFirm,
  createFirstGrant,
  createGrant,
  createPerson,
  endGrant,
  listCedants,
  listFirms,
  listGrants,
  listPeople,
  updatePerson,
} from '../../contract/people';
import type { Grants, NewGrant } from '../../domain/grant/grant';
import type { Firms, People } from '../../domain/person/person';
import type { Sessions } from '../../domain/session/session';
import type { Actor } from '../../domain/shared/actor';
import type { AuditTrail } from '../../domain/shared/audit';
import { Forbidden, InvalidInput, NotFound, Refused } from '../../domain/shared/errors';
import type { Transaction, UnitOfWork } from '../../domain/shared/transaction';
import { serve, type ApiRouter } from '../../http/serve';

export interface PeopleDeps {
  readonly people: People;
  readonly firms: Firms;
  readonly grants: Grants;
  readonly sessions: Sessions;
  readonly audit: AuditTrail;
  readonly unitOfWork: UnitOfWork;
  /** Makes a first password and its hash. */
  readonly firstPassword: () => Promise<{ password: string; hash: string }>;
}

function note(deps: PeopleDeps, transaction: Transaction, actor: Actor, action: string, subject: string, id: string, text?: string): Promise<void> {
  return deps.audit.append(transaction, {
    actorId: actor.personId,
    actor: actor.name,
    action,
    subject,
    subjectId: id,
    note: text ?? null,
  });
}

function boundsInWords(grant: NewGrant): string {
  return `line up to ${grant.largestLineAmount} and ${grant.largestLineShare * 100}%, adequacy from ${grant.lowestAdequacy}, below walk-away ${grant.belowWalkAway ? 'yes' : 'no'}, ${grant.startsOn} to ${grant.endsOn}`;
}

export function registerPeople(router: ApiRouter, deps: PeopleDeps): void {
  const { people, firms, grants, unitOfWork } = deps;

  serve(router, listPeople, () => people.list());

  serve(router, createPerson, async ({ actor, body }) => {
    const { password, hash } = await deps.firstPassword();
    const person = await unitOfWork.run(async (transaction) => {
      const created = await people.create(transaction, { ...body, passwordHash: hash });
      await note(deps, transaction, actor, 'account opened', 'person', created.id, created.role);
      return created;
    });
    return { person, firstPassword: password };
  });

  serve(router, updatePerson, async ({ actor, params, body, ifMatch }) => {
    if (params.id === actor.personId && body.active === false) {
      throw new Refused([{ code: 'own account', message: 'You cannot switch off your own account.' }]);
    }
    return unitOfWork.run(async (transaction) => {
      const change = { ...(body.name === undefined ? {} : { name: body.name }), ...(body.active === undefined ? {} : { active: body.active }) };
      const person = await people.update(transaction, params.id, ifMatch, change);
      if (body.active === false) await deps.sessions.endAllOf(transaction, person.id, null);
      await note(deps, transaction, actor, 'account changed', 'person', person.id, body.active === undefined ? 'renamed' : body.active ? 'switched on' : 'switched off');
      return person;
    });
  });

  serve(router, listGrants, async ({ params }) => {
    if ((await people.byId(params.id)) === null) throw new NotFound('person');
    return grants.listOf(params.id);
  });

  const grantTo = async (transaction: Transaction, actor: Actor, personId: string, bounds: Omit<NewGrant, 'personId'>) => {
    if (personId === actor.personId) throw new Forbidden('Nobody grants authority to themselves.');
    const person = await people.byId(personId);
    if (person === null) throw new NotFound('person');
    if (person.role !== 'underwriter' && person.role !== 'senior underwriter') {
      throw new InvalidInput([{ path: 'id', message: `authority is granted to underwriters, and ${person.name} is ${person.role}` }]);
    }
    const created = await grants.create(transaction, { personId, ...bounds }, actor.personId);
    await note(deps, transaction, actor, 'authority granted', 'person', personId, boundsInWords(created));
    return created;
  };

  serve(router, createGrant, ({ actor, params, body }) => unitOfWork.run((transaction) => grantTo(transaction, actor, params.id, body)));

  serve(router, createFirstGrant, ({ actor, params, body }) =>
    unitOfWork.run(async (transaction) => {
      if (await grants.anySeniorHoldsOne(transaction)) {
        throw new Refused([{ code: 'not first', message: 'A senior underwriter holds authority already: seniors grant it from here on.' }]);
      }
      if ((await people.byId(params.id))?.role !== 'senior underwriter') {
        throw new InvalidInput([{ path: 'id', message: 'the first grant goes to a senior underwriter' }]);
      }
      return grantTo(transaction, actor, params.id, body);
    }),
  );

  serve(router, endGrant, ({ actor, params }) =>
    unitOfWork.run(async (transaction) => {
      const grant = await grants.byId(params.id);
      if (grant === null) throw new NotFound('grant');
      if (grant.personId === actor.personId) throw new Forbidden('Nobody changes their own authority.');
      await grants.end(transaction, grant.id);
      await note(deps, transaction, actor, 'authority ended', 'person', grant.personId);
      return undefined;
    }),
  );

  serve(router, listFirms, () => firms.list());
  serve(router, createFirm, ({ actor, body }) =>
    unitOfWork.run(async (transaction) => {
      const firm = await firms.create(transaction, body.name);
      await note(deps, transaction, actor, 'broker firm recorded', 'broker firm', firm.id);
      return firm;
    }),
  );
  serve(router, createContact, ({ actor, params, body }) =>
    unitOfWork.run(async (transaction) => {
      const contact = await firms.addContact(transaction, params.id, body);
      await note(deps, transaction, actor, 'contact recorded', 'broker firm', params.id);
      return contact;
    }),
  );
  serve(router, listCedants, () => firms.cedants());
  serve(router, createCedant, ({ actor, body }) =>
    unitOfWork.run(async (transaction) => {
      const cedant = await firms.createCedant(transaction, body);
      await note(deps, transaction, actor, 'cedant recorded', 'cedant', cedant.id);
      return cedant;
    }),
  );
}
