import { boolean, date, foreignKey, integer, jsonb, pgTable, primaryKey, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { organizations } from '../organizations/tables';
import type { DayPlanLine } from './types';

const at = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });

export const tournaments = pgTable(
  'tournaments',
  {
    orgId: uuid('org_id')
      .notNull()
      .references(() => organizations.orgId),
    id: uuid('id').notNull(),
    slug: text('slug').notNull(),
    /** 'Larkwater' is said in lists; 'Larkwater Tournament' is the heading. */
    shortName: text('short_name').notNull(),
    name: text('name').notNull(),
    day: date('day', { mode: 'string' }).notNull(),
    /** Wall-clock HH:MM in the organization's zone. */
    startsAt: text('starts_at').notNull(),
    endsAt: text('ends_at').notNull(),
    venue: text('venue').notNull().default(''),
    venueNote: text('venue_note').notNull().default(''),
    summary: text('summary').notNull().default(''),
    /** What the public programme shows along the rule. */
    dayPlan: jsonb('day_plan').$type<DayPlanLine[]>().notNull().default([]),
    /** Whether the public programme may be seen. */
    isPublished: boolean('is_published').notNull().default(false),
    /** How many of a team's worst events are left out of its total. */
    dropWorst: integer('drop_worst').notNull().default(0),
    /** How many teams of a division go on, and how many of one school at most. */
    advance: integer('advance').notNull().default(0),
    perSchool: integer('per_school').notNull().default(1),
    createdAt: at('created_at').notNull(),
  },
  (t) => [
    primaryKey({ name: 'tournaments_pkey', columns: [t.orgId, t.id] }),
    uniqueIndex('tournaments_slug_key').on(t.orgId, t.slug),
  ],
);

export const divisions = pgTable(
  'divisions',
  {
    orgId: uuid('org_id').notNull(),
    id: uuid('id').notNull(),
    tournamentId: uuid('tournament_id').notNull(),
    slug: text('slug').notNull(),
    name: text('name').notNull(),
    /** One letter, and one shape: never colour alone. */
    letter: text('letter').notNull(),
    shape: text('shape', { enum: ['round', 'square'] }).notNull(),
    position: integer('position').notNull(),
  },
  (t) => [
    primaryKey({ name: 'divisions_pkey', columns: [t.orgId, t.id] }),
    uniqueIndex('divisions_slug_key').on(t.orgId, t.tournamentId, t.slug),
    uniqueIndex('divisions_letter_key').on(t.orgId, t.tournamentId, t.letter),
    foreignKey({ name: 'divisions_tournament', columns: [t.orgId, t.tournamentId], foreignColumns: [tournaments.orgId, tournaments.id] }),
  ],
);
