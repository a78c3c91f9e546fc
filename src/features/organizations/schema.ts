import { z } from 'zod';
import { isCurrency, isTimeZone, RESERVED_ORGANIZATION_SLUGS } from './constants';

const line = (most: number) =>
  z
    .string('Write some text.')
    .trim()
    .max(most, `Keep this within ${most} characters.`)
    .regex(/^[^\u0000-\u001f\u007f]*$/, 'This holds a character that can’t be kept. Type it again.');

const address = (message: string) => line(254).regex(/^[^\s@<>"(),;:\\[\]]+@[^\s@<>"(),;:\\[\]]+\.[^\s@<>"(),;:\\[\].]+$/, message);

/** Where an organization is found. */
export const organizationSlug = z
  .string('Choose an address.')
  .trim()
  .toLowerCase()
  .min(2, 'Use at least two characters.')
  .max(48, 'Keep the address within 48 characters.')
  .regex(/^[a-z0-9](-?[a-z0-9])*$/, 'Use small letters, digits and single dashes.')
  .refine((s) => !RESERVED_ORGANIZATION_SLUGS.includes(s), 'That address is used by Fairlead itself. Choose another.');

const particulars = {
  name: line(80).min(2, 'Write the organization’s name.'),
  timeZone: z.string('Choose the time zone.').refine(isTimeZone, 'Choose the time zone from the list.'),
  currency: z.string('Choose the currency.').refine(isCurrency, 'Choose the currency from the list.'),
  contact: z.union([z.literal(''), address('Write an e-mail address, such as office@example.org.')], 'Write an e-mail address, such as office@example.org.').default(''),
};

export const createOrganizationInput = z.strictObject({ ...particulars, slug: organizationSlug });
export type CreateOrganization = z.infer<typeof createOrganizationInput>;

export const updateOrganizationInput = z.strictObject(particulars);
export type UpdateOrganization = z.infer<typeof updateOrganizationInput>;

/** A place that was left out comes as nothing or as an empty text, with and without script. */
const place = z
  .union([z.literal(''), z.null(), z.string().regex(/^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/, 'Choose one from the list.')], 'Choose one from the list.')
  .optional()
  .transform((v) => v || null);

const role = z.enum(['owner', 'treasurer', 'director', 'leader', 'volunteer', 'coach'], 'Choose the role.');

export const roleInput = z.strictObject({ role, tournamentId: place, eventId: place, schoolId: place });
export type RoleInput = z.infer<typeof roleInput>;

export const inviteInput = z.strictObject({ email: address('Write the e-mail address of the person, such as name@example.org.'), ...roleInput.shape });
export type Invite = z.infer<typeof inviteInput>;
