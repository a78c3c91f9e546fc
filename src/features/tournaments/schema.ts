import { z } from 'zod';
import { isWallTime, wallMinutes } from '~/domain/time';
import { RESERVED_TOURNAMENT_SLUGS } from './constants';

const line = (most: number, required?: string) => {
  const base = z
    .string(required ?? 'Write some text.')
    .trim()
    .max(most, `Keep this within ${most} characters.`)
    .regex(/^[^\u0000-\u001f\u007f]*$/, 'This holds a character that can’t be kept. Type it again.');
  return required ? base.min(1, required) : base;
};
const paragraph = (most: number) =>
  z
    .string()
    .trim()
    .max(most, `Keep this within ${most} characters.`)
    .regex(/^[^\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f]*$/, 'This holds a character that can’t be kept. Type it again.')
    .default('');
const wall = (message: string) => z.string(message).refine(isWallTime, message);
const whole = (least: number, most: number, message: string) => z.coerce.number(message).int(message).min(least, message).max(most, message);

const dayPlan = z
  .array(
    z.strictObject({
      label: line(40, 'Say what happens then.'),
      from: wall('Write when it begins, such as 09:00.'),
      to: wall('Write when it ends, such as 09:50.'),
    }),
  )
  .max(24, 'The plan can have up to 24 lines.')
  .superRefine((lines, ctx) => {
    lines.forEach((l, i) => {
      if (wallMinutes(l.to) <= wallMinutes(l.from)) ctx.addIssue({ code: 'custom', path: [i, 'to'], message: `${l.label || 'This'} ends before it begins.` });
    });
  })
  .transform((lines) => [...lines].sort((a, b) => wallMinutes(a.from) - wallMinutes(b.from)));

const shape = {
  name: line(80, 'Give the tournament its full name, such as Larkwater Tournament.'),
  shortName: line(30, 'Give it a short name for lists, such as Larkwater.'),
  day: z
    .string('Choose the day.')
    .regex(/^\d{4}-\d{2}-\d{2}$/, 'Choose the day.')
    .refine((d) => !Number.isNaN(Date.parse(`${d}T00:00:00Z`)), 'There is no such day.'),
  startsAt: wall('Write when the day begins, such as 08:00.'),
  endsAt: wall('Write when the day ends, such as 15:00.'),
  venue: line(120).default(''),
  venueNote: line(200).default(''),
  summary: paragraph(600),
};
const endAfterStart = (v: { startsAt: string; endsAt: string }, ctx: z.RefinementCtx) => {
  if (wallMinutes(v.endsAt) <= wallMinutes(v.startsAt)) ctx.addIssue({ code: 'custom', path: ['endsAt'], message: 'The day must end after it begins.' });
};

/** Where a tournament is found under its organization. */
export const tournamentSlug = z
  .string('Choose an address.')
  .trim()
  .toLowerCase()
  .min(2, 'Use at least two characters.')
  .max(48, 'Keep the address within 48 characters.')
  .regex(/^[a-z0-9](-?[a-z0-9])*$/, 'Use small letters, digits and single dashes.')
  .refine((s) => !(RESERVED_TOURNAMENT_SLUGS as readonly string[]).includes(s), 'That address is used by Fairlead itself. Choose another.');

export const createTournamentInput = z.strictObject({ ...shape, slug: tournamentSlug }).superRefine(endAfterStart);
export type CreateTournament = z.infer<typeof createTournamentInput>;

export const updateTournamentInput = z.strictObject(shape).superRefine(endAfterStart);
export type UpdateTournament = z.infer<typeof updateTournamentInput>;

/** Lines as a form sends them: a list, or without script an object with numbered keys. Blank ones are passed over. */
function writtenLines(value: unknown): unknown {
  if (value === undefined || value === null || value === '') return [];
  const list: unknown[] = Array.isArray(value) ? value : typeof value === 'object' ? Object.values(value) : [value];
  const blank = (v: unknown) => v === undefined || v === null || (typeof v === 'string' && v.trim() === '');
  return list.filter((line) => typeof line !== 'object' || line === null || !Object.values(line).every(blank));
}

export const dayPlanInput = z.strictObject({ lines: z.preprocess(writtenLines, dayPlan) });

export const rulesInput = z.strictObject({
  dropWorst: whole(0, 10, 'Write how many of a team’s worst events are left out: 0 to 10.'),
  advance: whole(0, 200, 'Write how many teams of a division go on: 0 to 200.'),
  perSchool: whole(1, 50, 'Write how many of one school may go on: 1 to 50.'),
});
export type Rules = z.infer<typeof rulesInput>;

export const publishInput = z.strictObject({
  published: z.union([z.boolean(), z.enum(['true', 'false']).transform((v) => v === 'true')]),
});

export const divisionInput = z.strictObject({
  name: line(30, 'Name the division, such as Junior.'),
  letter: z
    .string('Choose one letter.')
    .trim()
    .toUpperCase()
    .regex(/^[A-Z]$/, 'Choose one letter: it stands in front of team numbers.'),
  shape: z.enum(['round', 'square'], 'Choose the shape of its mark.'),
});
export type DivisionInput = z.infer<typeof divisionInput>;

/** A form without fields. */
export const emptyInput = z.strictObject({});
