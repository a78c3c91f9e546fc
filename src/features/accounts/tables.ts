import { sql } from 'drizzle-orm';
import { boolean, index, integer, pgTable, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core';

const at = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });

/** People are outside any organization: one account may serve several. */
export const people = pgTable(
  'people',
  {
    id: uuid('id').primaryKey(),
    name: text('name').notNull(),
    /** As typed; unique in lower case. */
    email: text('email').notNull(),
    /** Argon2id. Null for someone who was invited and has not chosen one. */
    passwordHash: text('password_hash'),
    emailVerifiedAt: at('email_verified_at'),
    isOperator: boolean('is_operator').notNull().default(false),
    createdAt: at('created_at').notNull(),
  },
  (t) => [uniqueIndex('people_email_key').on(sql`lower(${t.email})`)],
);

/** Sessions; `id` is the SHA-256 of what the cookie holds. */
export const sessions = pgTable(
  'sessions',
  {
    id: text('id').primaryKey(),
    personId: uuid('person_id')
      .notNull()
      .references(() => people.id, { onDelete: 'cascade' }),
    /** Moves on with use. */
    expiresAt: at('expires_at').notNull(),
    /** The absolute lifetime counts from here. */
    createdAt: at('created_at').notNull(),
    /** Moves on with use, in steps of some minutes; shown to the session's owner. */
    lastUsedAt: at('last_used_at').notNull().defaultNow(),
    /** What the device calls itself, shortened, so that its owner knows it again. */
    device: text('device').notNull().default(''),
  },
  (t) => [index('sessions_person').on(t.personId)],
);

/** Verification, reset and change-of-address codes. The code itself is derived from `id` and the service's secret; only its hash is here. */
export const oneTimeCodes = pgTable(
  'one_time_codes',
  {
    id: uuid('id').primaryKey(),
    personId: uuid('person_id')
      .notNull()
      .references(() => people.id, { onDelete: 'cascade' }),
    purpose: text('purpose', { enum: ['verify', 'reset', 'change'] }).notNull(),
    codeHash: text('code_hash').notNull(),
    /** The address a `change` code is to prove. */
    email: text('email'),
    /** The path to go to once the code has done its work; empty for the person's own page. */
    goesTo: text('goes_to').notNull().default(''),
    createdAt: at('created_at').notNull(),
    expiresAt: at('expires_at').notNull(),
    usedAt: at('used_at'),
  },
  (t) => [uniqueIndex('one_time_codes_hash_key').on(t.codeHash), index('one_time_codes_person').on(t.personId)],
);

/** Counters of tries; `key` is a hash, so no address or e-mail is kept here. */
export const throttles = pgTable('throttles', {
  key: text('key').primaryKey(),
  count: integer('count').notNull(),
  windowEndsAt: at('window_ends_at').notNull(),
});
