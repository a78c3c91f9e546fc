import { z } from 'zod';
import { EVENT_MODULE_KEYS } from '~/event-modules/registry';

const id = (message: string) => z.string(message).regex(/^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/, message);
const line = (most: number) =>
  z
    .string('Write some text.')
    .trim()
    .max(most, `Keep this within ${most} characters.`)
    .regex(/^[^\u0000-\u001f\u007f]*$/, 'This holds a character that can’t be kept. Type it again.');
const flag = z.union([z.boolean(), z.enum(['true', 'on', 'false', '']).transform((v) => v === 'true' || v === 'on')]).default(false);

export const addEventInput = z.strictObject({
  name: line(60).min(1, 'Name the event, such as Optics Shoot.'),
  moduleKey: z.enum(EVENT_MODULE_KEYS as unknown as [string, ...string[]], 'Choose the kind of event.'),
  divisionIds: z.union([z.array(id('Choose the divisions.')), id('Choose the divisions.').transform((v) => [v])], 'Choose at least one division.').refine((v) => v.length > 0, 'Choose at least one division.'),
  room: line(40).default(''),
  isTrial: flag,
});
export type AddEvent = z.infer<typeof addEventInput>;

export const changeEventInput = z.strictObject({
  name: addEventInput.shape.name,
  room: line(40).default(''),
  isTrial: flag,
});

export const leaderInput = z.strictObject({ personId: id('Choose somebody.') });
