import { z } from 'zod';

const id = (message: string) => z.string(message).regex(/^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/, message);

export const teamInput = z.strictObject({
  divisionId: id('Choose the division.'),
  schoolId: id('Choose the school.'),
  name: z
    .string('Write the team’s name.')
    .trim()
    .min(1, 'Write the team’s name.')
    .max(100, 'Keep the name within 100 characters.')
    .regex(/^[^\u0000-\u001f\u007f]*$/, 'This holds a character that can’t be kept. Type it again.'),
  /** Left out: the next free number of the division. */
  number: z
    .union([z.literal('').transform(() => null), z.null(), z.coerce.number('Write a whole number from 1 to 999.').int('Write a whole number from 1 to 999.').min(1, 'Write a whole number from 1 to 999.').max(999, 'Write a whole number from 1 to 999.')])
    .optional(),
});
export type TeamInput = z.infer<typeof teamInput>;

export const changeTeamInput = z.strictObject({ name: teamInput.shape.name, number: z.coerce.number('Write a whole number from 1 to 999.').int('Write a whole number from 1 to 999.').min(1, 'Write a whole number from 1 to 999.').max(999, 'Write a whole number from 1 to 999.') });
