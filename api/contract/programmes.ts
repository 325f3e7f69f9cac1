import * as z from 'zod';
import { amountText, currency, id, idParams, isoDate, name, positiveAmountText, share } from './common';
import { route } from './route';

const tag = 'Programmes';

/** Terms of one excess-of-loss layer, for 100%, in the programme's currency. */
export const layerTerms = z.object({
  /** Names the layer within its programme; stays when layers are moved. */
  key: z.string().regex(/^[a-z0-9-]{1,40}$/),
  name: name.max(80),
  /** Occurrence limit. */
  limit: positiveAmountText,
  /** Occurrence attachment (deductible). */
  attachment: amountText,
  /** Annual aggregate deductible. */
  annualDeductible: amountText.default('0'),
  /** One entry a reinstatement, in order: its price as a share of the layer premium (1 is 100%), pro rata as to amount, 100% as to time. */
  reinstatements: z
    .array(z.number().min(0, 'must be 0% or more').max(5, 'must be 500% or less'))
    .max(5, 'must be five reinstatements at most'),
  /** Brokerage as a share of the layer premium; none on reinstatement premiums. */
  brokerage: share.max(0.5, 'must be 50% or less'),
  /** The house's written line, a share of 100% of the layer. */
  writtenLine: share.gt(0, 'must be above 0%'),
});
export type LayerTerms = z.infer<typeof layerTerms>;

export const programmeTerms = z.object({
  name: name.max(120),
  currency,
  inceptionOn: isoDate,
  /** Loss table versions whose losses are summed. */
  lossTableIds: z.array(id).min(1, 'must name at least one loss table').max(10),
  layers: z
    .array(layerTerms)
    .min(1, 'must have at least one layer')
    .max(10, 'must have ten layers at most')
    .refine((layers) => new Set(layers.map((l) => l.key)).size === layers.length, 'layer keys must differ'),
});
export type ProgrammeTerms = z.infer<typeof programmeTerms>;

export const programme = z.object({
  id,
  submissionId: id,
  terms: programmeTerms,
  /** Moves with every edit; the entity tag. */
  version: z.number().int(),
  updatedAt: z.string(),
  latestRunId: id.nullable(),
});
export type Programme = z.infer<typeof programme>;

export const listProgrammes = route({
  method: 'get', path: '/submissions/:id/programmes', access: 'submissions.read', tag, summary: 'Programmes of a submission', params: idParams,
  reply: z.array(programme),
});
export const createProgramme = route({
  method: 'post', path: '/submissions/:id/programmes', access: 'submissions.write', tag, summary: 'Add a programme', params: idParams,
  body: programmeTerms, reply: programme, status: 201,
});
export const readProgramme = route({
  method: 'get', path: '/programmes/:id', access: 'submissions.read', tag, summary: 'One programme', params: idParams, reply: programme, edits: 'etag',
});
export const updateProgramme = route({
  method: 'put', path: '/programmes/:id', access: 'submissions.write', tag, summary: "Replace a programme's terms", params: idParams,
  body: programmeTerms, reply: programme, edits: 'if-match',
});
