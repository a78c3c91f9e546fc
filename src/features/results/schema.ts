import { z } from 'zod';

export const releaseInput = z.strictObject({
  /** What changed since the release before, in public words; needed from the second on. */
  publicLine: z
    .string()
    .trim()
    .max(300, 'Keep the line within 300 characters.')
    .regex(/^[^\u0000-\u001f\u007f]*$/, 'This holds a character that can’t be kept. Type it again.')
    .default(''),
  when: z.enum(['now', 'later'], 'Choose when the public sees the results.'),
  /** Wall time in the organization's zone, 'YYYY-MM-DDTHH:MM'; needed when it is later. */
  at: z.union([z.null(), z.literal(''), z.string().regex(/^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}$/, 'Choose the day and the time.')]).default(''),
  /** Says which results were looked at. */
  seen: z.string().max(100),
});
export type ReleaseInput = z.infer<typeof releaseInput>;
