import * as z from 'zod';
import { CATALOGUE_STATES } from '../domain/vocabulary';
import { id, idParams, name, note, page, pageOf, personRef, reason } from './common';
import { route } from './route';

const tag = 'Event catalogues';

export const catalogueVersion = z.object({
  id,
  catalogueId: id,
  number: z.number().int(),
  state: z.enum(CATALOGUE_STATES),
  fileName: z.string(),
  contentHash: z.string(),
  eventCount: z.number().int(),
  /** Sum of rates, events per year. */
  ratePerYear: z.number(),
  perils: z.array(z.object({ peril: z.string(), events: z.number().int(), ratePerYear: z.number() })),
  regions: z.array(z.object({ region: z.string(), events: z.number().int(), ratePerYear: z.number() })),
  uploadedBy: personRef,
  uploadedAt: z.string(),
  releasedBy: personRef.nullable(),
  releasedAt: z.string().nullable(),
});
export type CatalogueVersion = z.infer<typeof catalogueVersion>;

export const catalogue = z.object({
  id,
  name: z.string(),
  description: z.string(),
  released: catalogueVersion.nullable(),
  versions: z.array(catalogueVersion),
});
export type Catalogue = z.infer<typeof catalogue>;

export const catalogueEvent = z.object({
  event: z.string(),
  ratePerYear: z.number(),
  peril: z.string(),
  region: z.string(),
  seasonDay: z.number().nullable(),
  group: z.string().nullable(),
  varianceToMean: z.number().nullable(),
});
export type CatalogueEvent = z.infer<typeof catalogueEvent>;

export const listCatalogues = route({
  method: 'get', path: '/catalogues', access: 'catalogues.read', tag, summary: 'Event catalogues with their versions', reply: z.array(catalogue),
});
export const createCatalogue = route({
  method: 'post', path: '/catalogues', access: 'catalogues.upload', tag, summary: 'Open an event catalogue, ready for its first version',
  body: z.object({ name, description: note.default('') }), reply: catalogue, status: 201,
});
export const readCatalogue = route({
  method: 'get', path: '/catalogues/:id', access: 'catalogues.read', tag, summary: 'One event catalogue', params: idParams, reply: catalogue,
});
export const uploadCatalogueVersion = route({
  method: 'post', path: '/catalogues/:id/versions', access: 'catalogues.upload', tag,
  summary: 'Upload a version: CSV with event, rate_per_year, peril, region, optional season_day, group, variance_to_mean',
  params: idParams, form: 'file', reply: catalogueVersion, status: 201,
});
export const listCatalogueEvents = route({
  method: 'get', path: '/catalogue-versions/:id/events', access: 'catalogues.read', tag, summary: 'The events of a version',
  params: idParams, query: page.extend({ search: z.string().max(200).optional() }), reply: pageOf(catalogueEvent),
});
export const releaseCatalogueVersion = route({
  method: 'post', path: '/catalogue-versions/:id/release', access: 'catalogues.release', tag,
  summary: 'Release a version for pricing; the one released before is withdrawn', params: idParams, body: z.object({ note: note.default('') }),
  reply: catalogueVersion,
});
export const withdrawCatalogueVersion = route({
  method: 'post', path: '/catalogue-versions/:id/withdraw', access: 'catalogues.release', tag, summary: 'Withdraw a version from pricing',
  params: idParams, body: z.object({ reason }), reply: catalogueVersion,
});
