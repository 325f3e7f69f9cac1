import * as z from 'zod';

export const id = z.uuid();
export const idParams = z.object({ id });

/** An amount agreed or stored: decimal text with at most four places, never a float on the wire. */
export const amountText = z
  .string()
  .regex(/^(0|[1-9]\d{0,14})(\.\d{1,4})?$/, 'must be an amount of 0 or more, such as 12500000 or 12500000.50');
export const positiveAmountText = amountText.refine((text) => Number(text) > 0, 'must be above 0');
/** A share between 0 and 1, stored with eight places. */
export const share = z.number().min(0, 'must be 0% or more').max(1, 'must be 100% or less');
export const currency = z.string().regex(/^[A-Z]{3}$/, 'must be an ISO 4217 code of three letters');
export const isoDate = z.iso.date();
export const isoTime = z.iso.datetime({ offset: true });
export const name = z.string().trim().min(1, 'must not be empty').max(200);
export const note = z.string().trim().max(4000);
export const reason = z.string().trim().min(3, 'must say why, in a few words').max(4000);
export const email = z.email().max(254).transform((text) => text.toLowerCase());

export const page = z.object({
  offset: z.coerce.number().int().min(0).default(0),
  limit: z.coerce.number().int().min(1).max(200).default(50),
});
export function pageOf<T extends z.ZodType>(item: T) {
  return z.object({ items: z.array(item), total: z.number().int() });
}

export const personRef = z.object({ id, name: z.string() });

/** RFC 9457 problem details with our members: every fault of a request at once, each at its place. */
export const problem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string().optional(),
  /** Identifies the log line of an unexpected error. */
  errorId: z.string().optional(),
  errors: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
  /** Why an act was refused, all reasons at once. */
  reasons: z.array(z.object({ code: z.string(), message: z.string() })).optional(),
});
export type Problem = z.infer<typeof problem>;
