import { z } from 'zod';

const line = (most: number) =>
  z
    .string('Write some text.')
    .trim()
    .max(most, `Keep this within ${most} characters.`)
    .regex(/^[^\u0000-\u001f\u007f]*$/, 'This holds a character that can’t be kept. Type it again.');

export const schoolInput = z.strictObject({
  name: line(100).min(1, 'Write the school’s name.'),
  town: line(60).default(''),
});
export type SchoolInput = z.infer<typeof schoolInput>;
