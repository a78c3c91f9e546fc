import { index, jsonb, pgTable, primaryKey, text, timestamp, uuid } from 'drizzle-orm/pg-core';

/** Who did what to which thing when. Rows are only ever added; the application's role may not change or remove one. */
export const auditEntries = pgTable(
  'audit_entries',
  {
    orgId: uuid('org_id').notNull(),
    id: uuid('id').notNull(),
    at: timestamp('at', { withTimezone: true, mode: 'date' }).notNull(),
    /** Null when the service itself acted. */
    actorId: uuid('actor_id'),
    /** The command's noun and verb, such as `score.kept`. */
    action: text('action').notNull(),
    subjectType: text('subject_type').notNull(),
    subjectId: uuid('subject_id'),
    tournamentId: uuid('tournament_id'),
    /** Before and after, or whatever tells the story; no secrets, no students' data. */
    detail: jsonb('detail').notNull(),
  },
  (t) => [
    primaryKey({ name: 'audit_entries_pkey', columns: [t.orgId, t.id] }),
    index('audit_entries_at').on(t.orgId, t.at),
  ],
);
