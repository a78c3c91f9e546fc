import { foreignKey, index, integer, pgTable, primaryKey, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { schools } from '../schools/tables';
import { divisions, tournaments } from '../tournaments/tables';

/** A team entered in one division of one tournament. */
export const teams = pgTable(
  'teams',
  {
    orgId: uuid('org_id').notNull(),
    id: uuid('id').notNull(),
    tournamentId: uuid('tournament_id').notNull(),
    divisionId: uuid('division_id').notNull(),
    schoolId: uuid('school_id').notNull(),
    /** Within its division; shown behind the division's letter, 'S09'. */
    number: integer('number').notNull(),
    name: text('name').notNull(),
    state: text('state', { enum: ['waiting', 'confirmed', 'withdrawn'] }).notNull(),
    createdAt: timestamp('created_at', { withTimezone: true, mode: 'date' }).notNull(),
  },
  (t) => [
    primaryKey({ name: 'teams_pkey', columns: [t.orgId, t.id] }),
    uniqueIndex('teams_number_key').on(t.orgId, t.divisionId, t.number),
    index('teams_school').on(t.orgId, t.schoolId),
    index('teams_tournament').on(t.orgId, t.tournamentId),
    foreignKey({ name: 'teams_tournament_fk', columns: [t.orgId, t.tournamentId], foreignColumns: [tournaments.orgId, tournaments.id] }),
    foreignKey({ name: 'teams_division_fk', columns: [t.orgId, t.divisionId], foreignColumns: [divisions.orgId, divisions.id] }),
    foreignKey({ name: 'teams_school_fk', columns: [t.orgId, t.schoolId], foreignColumns: [schools.orgId, schools.id] }),
  ],
);
