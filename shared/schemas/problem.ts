import { z } from 'zod';

/** One thing that is wrong with an input: which field, and what it should be. */
export const inputIssue = z.object({ path: z.string(), message: z.string() });
export type InputIssue = z.infer<typeof inputIssue>;

/** Body of every failed API response. `code` is stable; `message` may be shown; `issues` only with 422. */
export const problemResponse = z.object({
  error: z.object({
    code: z.string(),
    message: z.string(),
    issues: z.array(inputIssue).optional(),
    requestId: z.string().optional(),
    /** Figures behind a refusal, e.g. quota: { usedCpuSeconds, limitCpuSeconds }. */
    figures: z.record(z.string(), z.number()).optional(),
  }),
});
export type ProblemResponse = z.infer<typeof problemResponse>;

/** Writes a zod issue path the way DESIGN.md 6 shows it: `carbonSignals[3].shift`. */
export function formatIssuePath(path: ReadonlyArray<PropertyKey>): string {
  return path.reduce<string>(
    (text, part) => (typeof part === 'number' ? `${text}[${part}]` : text === '' ? String(part) : `${text}.${String(part)}`),
    '',
  );
}
