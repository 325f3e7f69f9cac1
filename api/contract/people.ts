import * as z from 'zod';
import { ROLES } from '../domain/vocabulary';
import { amountText, email, id, idParams, isoDate, name, share } from './common';
import { route } from './route';

const tag = 'People';

export const person = z.object({
  id,
  name: z.string(),
  email: z.string(),
  role: z.enum(ROLES),
  firm: z.object({ id, name: z.string() }).nullable(),
  active: z.boolean(),
  version: z.number().int(),
});
export type Person = z.infer<typeof person>;

export const newPerson = z
  .object({ name, email, role: z.enum(ROLES), firmId: id.nullable().default(null) })
  .refine((p) => (p.role === 'broker') === (p.firmId !== null), {
    path: ['firmId'],
    message: 'a broker belongs to a firm, and only a broker does',
  });

export const listPeople = route({
  method: 'get', path: '/people', access: 'people.read', tag, summary: 'Everyone with an account', reply: z.array(person),
});
export const createPerson = route({
  method: 'post', path: '/people', access: 'people.write', tag, summary: 'Open an account; answers its first password once',
  body: newPerson, reply: z.object({ person, firstPassword: z.string() }), status: 201,
});
export const updatePerson = route({
  method: 'patch', path: '/people/:id', access: 'people.write', tag, summary: 'Rename an account, or switch it off or on',
  params: idParams, body: z.object({ name: name.optional(), active: z.boolean().optional() }), reply: person, edits: 'if-match',
});

/** What a person may decide alone, between two dates. Bounds are those of one layer, in house currency. */
export const grant = z.object({
  id,
  personId: id,
  /** Largest written line × occurrence limit of a layer, house currency. */
  largestLineAmount: amountText,
  /** Largest written line as a share of 100% of a layer. */
  largestLineShare: share,
  /** Lowest quoted premium ÷ technical premium of a layer. */
  lowestAdequacy: z.number().min(0).max(10),
  /** Whether a layer may be quoted below its walk-away premium. */
  belowWalkAway: z.boolean(),
  startsOn: isoDate,
  endsOn: isoDate,
  grantedBy: z.object({ id, name: z.string() }).nullable(),
  /** Set when the grant was ended before its last day. */
  endedAt: z.string().nullable(),
});
export type Grant = z.infer<typeof grant>;

export const newGrant = z
  .object({
    largestLineAmount: amountText,
    largestLineShare: share,
    lowestAdequacy: z.number().min(0).max(10),
    belowWalkAway: z.boolean().default(false),
    startsOn: isoDate,
    endsOn: isoDate,
  })
  .refine((g) => g.startsOn <= g.endsOn, { path: ['endsOn'], message: 'must not be before the first day' });

export const listGrants = route({
  method: 'get', path: '/people/:id/grants', access: 'grants.read', tag, summary: 'The authority granted to a person',
  params: idParams, reply: z.array(grant),
});
export const createGrant = route({
  method: 'post', path: '/people/:id/grants', access: 'grants.write', tag,
  summary: 'Grant authority to another person (never to oneself)', params: idParams, body: newGrant, reply: grant, status: 201,
});
export const createFirstGrant = route({
  method: 'post', path: '/people/:id/first-grant', access: 'grants.first', tag,
  summary: "Record the first senior's authority, while no senior holds any", params: idParams, body: newGrant, reply: grant, status: 201,
});
export const endGrant = route({
  method: 'delete', path: '/grants/:id', access: 'grants.write', tag, summary: 'End a grant of another person today', params: idParams,
});

export const contact = z.object({ id, name: z.string(), email: z.string() });
export const brokerFirm = z.object({ id, name: z.string(), contacts: z.array(contact) });
export type BrokerFirm = z.infer<typeof brokerFirm>;
export const cedant = z.object({ id, name: z.string(), territory: z.string() });
export type Cedant = z.infer<typeof cedant>;

export const listFirms = route({
  method: 'get', path: '/broker-firms', access: 'firms.read', tag, summary: 'Broker firms and their contacts', reply: z.array(brokerFirm),
});
export const createFirm = route({
  method: 'post', path: '/broker-firms', access: 'firms.write', tag, summary: 'Record a broker firm', body: z.object({ name }),
  reply: brokerFirm, status: 201,
});
export const createContact = route({
  method: 'post', path: '/broker-firms/:id/contacts', access: 'firms.write', tag, summary: 'Record a contact of a broker firm',
  params: idParams, body: z.object({ name, email }), reply: contact, status: 201,
});
export const listCedants = route({
  method: 'get', path: '/cedants', access: 'firms.read', tag, summary: 'Cedants', reply: z.array(cedant),
});
export const createCedant = route({
  method: 'post', path: '/cedants', access: 'submissions.write', tag, summary: 'Record a cedant', body: z.object({ name, territory: name }),
  reply: cedant, status: 201,
});
