import * as z from 'zod';

/** One fault of an uploaded file, at its place. Lines count from 1, the header being line 1. */
export const fileProblem = z.object({
  line: z.number().int(),
  column: z.string().nullable(),
  value: z.string().nullable(),
  /** What is wrong and what would be right, in words. */
  message: z.string(),
});
export type FileProblem = z.infer<typeof fileProblem>;

/** The report on a refused file: every problem counted, the first 1,000 shown. */
export const fileReport = z.object({
  fileName: z.string(),
  rows: z.number().int(),
  problemCount: z.number().int(),
  problems: z.array(fileProblem).max(1000),
});
export type FileReport = z.infer<typeof fileReport>;

/** Answer to a refused upload: problem details with the report. */
export const fileProblemReply = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string().optional(),
  report: fileReport,
});
export type FileProblemReply = z.infer<typeof fileProblemReply>;
