import { sql } from 'drizzle-orm';
import { pgTable, primaryKey, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { organizations } from '../organizations/tables';

/** An organization's own record of a school. */
export const schools = pgTable(
  'schools',
  {
    orgId: uuid('org_id')
      .notNull()
      .references(() => organizations.orgId),
    id: uuid('id').notNull(),
    name: text('name').notNull(),
    town: text('town').notNull().default(''),
    createdAt: timestamp('created_at', { withTimezone: true, mode: 'date' }).notNull(),
  },
  (t) => [
    primaryKey({ name: 'schools_pkey', columns: [t.orgId, t.id] }),
    uniqueIndex('schools_name_key').on(t.orgId, sql`lower(${t.name})`),
  ],
);
