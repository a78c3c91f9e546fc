import { z } from 'zod';

const id = z.union([z.literal(''), z.string().regex(/^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/, 'Choose one from the list.')], 'Choose one from the list.').default('');
const day = z
  .string()
  .refine((d) => d === '' || (/^\d{4}-\d{2}-\d{2}$/.test(d) && !Number.isNaN(Date.parse(`${d}T00:00:00Z`))), 'Choose a day.')
  .default('');

export const auditFilterInput = z.strictObject({
  person: id,
  kind: z.string().trim().max(30, 'Choose one from the list.').default(''),
  tournament: id,
  text: z
    .string()
    .trim()
    .max(100, 'Keep this within 100 characters.')
    .regex(/^[^\u0000-\u001f\u007f]*$/, 'This holds a character that can’t be looked for.')
    .default(''),
  from: day,
  to: day,
});
