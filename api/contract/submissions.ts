import * as z from 'zod';
import { SUBMISSION_STATES } from '../domain/vocabulary';
import { currency, id, idParams, isoDate, name, note, page, pageOf, personRef } from './common';
import { route } from './route';

const tag = 'Submissions';

export const lossTable = z.object({
  /** Identifies this version of the table. */
  id,
  submissionId: id,
  name: z.string(),
  number: z.number().int(),
  catalogue: z.object({ id, name: z.string(), versionId: id, versionNumber: z.number().int() }),
  currency: z.string(),
  /** Basis of the figures in words: exposure date, growth, gross or net, what is omitted. */
  basisNote: z.string(),
  fileName: z.string(),
  contentHash: z.string(),
  rowCount: z.number().int(),
  /** Σ rate × mean over the rows, in the table's currency, on the catalogue version it was checked against. */
  yearlyMean: z.number(),
  uploadedBy: personRef,
  uploadedAt: z.string(),
  superseded: z.boolean(),
});
export type LossTable = z.infer<typeof lossTable>;

export const lossRow = z.object({
  event: z.string(),
  meanLoss: z.number(),
  sd: z.number(),
  commonShare: z.number(),
  exposedValue: z.number().nullable(),
});
export type LossRow = z.infer<typeof lossRow>;

export const submissionSummary = z.object({
  id,
  reference: z.string(),
  cedant: z.object({ id, name: z.string(), territory: z.string() }),
  brokerFirm: z.object({ id, name: z.string() }),
  contact: z.object({ id, name: z.string(), email: z.string() }),
  treatyYear: z.number().int(),
  inceptionOn: z.string(),
  currency: z.string(),
  state: z.enum(SUBMISSION_STATES),
  note: z.string(),
  owner: personRef,
  programmeCount: z.number().int(),
  lossTableCount: z.number().int(),
  version: z.number().int(),
});
export type SubmissionSummary = z.infer<typeof submissionSummary>;

export const newSubmission = z.object({
  cedantId: id,
  brokerFirmId: id,
  contactId: id,
  treatyYear: z.number().int().min(2000, 'must be a year from 2000').max(2100, 'must be a year up to 2100'),
  inceptionOn: isoDate,
  currency,
  note: note.default(''),
});
export const submissionEdit = z.object({ contactId: id, inceptionOn: isoDate, note, state: z.enum(SUBMISSION_STATES) }).partial();

export const listSubmissions = route({
  method: 'get', path: '/submissions', access: 'submissions.read', tag, summary: 'Submissions', reply: z.array(submissionSummary),
});
export const createSubmission = route({
  method: 'post', path: '/submissions', access: 'submissions.write', tag, summary: 'Open a submission', body: newSubmission,
  reply: submissionSummary, status: 201,
});
export const readSubmission = route({
  method: 'get', path: '/submissions/:id', access: 'submissions.read', tag, summary: 'One submission', params: idParams,
  reply: submissionSummary, edits: 'etag',
});
export const updateSubmission = route({
  method: 'patch', path: '/submissions/:id', access: 'submissions.write', tag, summary: 'Change a submission', params: idParams,
  body: submissionEdit, reply: submissionSummary, edits: 'if-match',
});
export const listLossTables = route({
  method: 'get', path: '/submissions/:id/loss-tables', access: 'submissions.read', tag, summary: 'Loss tables of a submission, newest first',
  params: idParams, reply: z.array(lossTable),
});
export const uploadLossTable = route({
  method: 'post', path: '/submissions/:id/loss-tables', access: 'submissions.write', tag,
  summary: 'Upload a loss table: CSV with event, mean_loss, sd, common_share, exposed_value. The same name again makes a new version',
  params: idParams, form: 'file',
  body: z.object({ name, catalogueId: id, currency, basisNote: note.default('') }),
  reply: lossTable, status: 201,
});
export const readLossTable = route({
  method: 'get', path: '/loss-tables/:id', access: 'submissions.read', tag, summary: 'One version of a loss table', params: idParams, reply: lossTable,
});
export const listLossRows = route({
  method: 'get', path: '/loss-tables/:id/rows', access: 'submissions.read', tag, summary: 'Rows of a loss table version',
  params: idParams, query: page, reply: pageOf(lossRow),
});

