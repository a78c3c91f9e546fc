import { foreignKey, integer, jsonb, pgTable, primaryKey, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { tournaments } from '../tournaments/tables';
import type { ReleaseSnapshot } from './types';

const at = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });

/** Numbered and frozen: a correction makes the next one. Only added to. */
export const releases = pgTable(
  'releases',
  {
    orgId: uuid('org_id').notNull(),
    id: uuid('id').notNull(),
    tournamentId: uuid('tournament_id').notNull(),
    number: integer('number').notNull(),
    /** What changed, in public words; empty for the first. */
    publicLine: text('public_line').notNull().default(''),
    /** Everything the results pages and files show, as it stood. */
    snapshot: jsonb('snapshot').$type<ReleaseSnapshot>().notNull(),
    releasedAt: at('released_at').notNull(),
    releasedBy: uuid('released_by').notNull(),
    /** The public sees it from this moment on (an embargo until the ceremony ends). */
    publicFrom: at('public_from').notNull(),
  },
  (t) => [
    primaryKey({ name: 'releases_pkey', columns: [t.orgId, t.id] }),
    uniqueIndex('releases_number_key').on(t.orgId, t.tournamentId, t.number),
    foreignKey({ name: 'releases_tournament_fk', columns: [t.orgId, t.tournamentId], foreignColumns: [tournaments.orgId, tournaments.id] }),
  ],
);
