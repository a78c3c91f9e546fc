import { sql } from 'drizzle-orm';
import { boolean, index, pgTable, primaryKey, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { people } from '../accounts/tables';

const at = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });

/** Which organization an address belongs to. Outside any organization, because it is what finds one. */
export const addresses = pgTable('addresses', {
  slug: text('slug').primaryKey(),
  orgId: uuid('org_id').notNull(),
});

export const organizations = pgTable('organizations', {
  orgId: uuid('org_id').primaryKey(),
  slug: text('slug').notNull(),
  name: text('name').notNull(),
  /** IANA name; every time of this office is shown in it. */
  timeZone: text('time_zone').notNull(),
  /** ISO 4217. */
  currency: text('currency').notNull(),
  /** Where the office can be written to; shown on public pages. */
  contact: text('contact').notNull().default(''),
  isDemo: boolean('is_demo').notNull().default(false),
  suspendedAt: at('suspended_at'),
  createdAt: at('created_at').notNull(),
});

export const memberships = pgTable(
  'memberships',
  {
    orgId: uuid('org_id').notNull(),
    id: uuid('id').notNull(),
    personId: uuid('person_id')
      .notNull()
      .references(() => people.id),
    role: text('role', { enum: ['owner', 'treasurer', 'director', 'leader', 'volunteer', 'coach'] }).notNull(),
    tournamentId: uuid('tournament_id'),
    eventId: uuid('event_id'),
    schoolId: uuid('school_id'),
    state: text('state', { enum: ['active', 'suspended'] }).notNull().default('active'),
    createdAt: at('created_at').notNull(),
  },
  (t) => [
    primaryKey({ name: 'memberships_pkey', columns: [t.orgId, t.id] }),
    // One grant once: an absent place counts as equal.
    uniqueIndex('memberships_grant_key').on(
      t.orgId,
      t.personId,
      t.role,
      sql`coalesce(${t.tournamentId}, '00000000-0000-0000-0000-000000000000')`,
      sql`coalesce(${t.eventId}, '00000000-0000-0000-0000-000000000000')`,
      sql`coalesce(${t.schoolId}, '00000000-0000-0000-0000-000000000000')`,
    ),
    index('memberships_person').on(t.personId),
  ],
);

export const invitations = pgTable(
  'invitations',
  {
    orgId: uuid('org_id').notNull(),
    id: uuid('id').notNull(),
    email: text('email').notNull(),
    role: text('role', { enum: ['owner', 'treasurer', 'director', 'leader', 'volunteer', 'coach'] }).notNull(),
    tournamentId: uuid('tournament_id'),
    eventId: uuid('event_id'),
    schoolId: uuid('school_id'),
    tokenHash: text('token_hash').notNull(),
    invitedBy: uuid('invited_by').notNull(),
    createdAt: at('created_at').notNull(),
    expiresAt: at('expires_at').notNull(),
    acceptedAt: at('accepted_at'),
    acceptedBy: uuid('accepted_by'),
    revokedAt: at('revoked_at'),
  },
  (t) => [
    primaryKey({ name: 'invitations_pkey', columns: [t.orgId, t.id] }),
    uniqueIndex('invitations_token_key').on(t.orgId, t.tokenHash),
    index('invitations_email').on(t.orgId, sql`lower(${t.email})`),
  ],
);
