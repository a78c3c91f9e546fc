import { boolean, foreignKey, index, integer, jsonb, pgTable, primaryKey, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { divisions, tournaments } from '../tournaments/tables';

const at = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });

/** One event in one division: the thing that is set up, scored and handed in. */
export const events = pgTable(
  'events',
  {
    orgId: uuid('org_id').notNull(),
    id: uuid('id').notNull(),
    tournamentId: uuid('tournament_id').notNull(),
    divisionId: uuid('division_id').notNull(),
    slug: text('slug').notNull(),
    name: text('name').notNull(),
    moduleKey: text('module_key').notNull(),
    /** A trial event is ranked but counts for no team's total. */
    isTrial: boolean('is_trial').notNull().default(false),
    room: text('room').notNull().default(''),
    state: text('state', { enum: ['open', 'handed-in', 'accepted'] }).notNull().default('open'),
    /** What the event's module makes of it; null until first kept. */
    setup: jsonb('setup').$type<unknown>(),
    /** Goes up with every kept set-up. */
    setupVersion: integer('setup_version').notNull().default(0),
    /** Scoring opens when the set-up is locked. */
    setupLockedAt: at('setup_locked_at'),
    setupLockedBy: uuid('setup_locked_by'),
    handedInAt: at('handed_in_at'),
    handedInBy: uuid('handed_in_by'),
    acceptedAt: at('accepted_at'),
    acceptedBy: uuid('accepted_by'),
    createdAt: at('created_at').notNull(),
  },
  (t) => [
    primaryKey({ name: 'events_pkey', columns: [t.orgId, t.id] }),
    uniqueIndex('events_slug_key').on(t.orgId, t.tournamentId, t.slug),
    uniqueIndex('events_name_key').on(t.orgId, t.divisionId, t.name),
    index('events_tournament').on(t.orgId, t.tournamentId),
    foreignKey({ name: 'events_tournament_fk', columns: [t.orgId, t.tournamentId], foreignColumns: [tournaments.orgId, tournaments.id] }),
    foreignKey({ name: 'events_division_fk', columns: [t.orgId, t.divisionId], foreignColumns: [divisions.orgId, divisions.id] }),
  ],
);
