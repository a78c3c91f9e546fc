import { bigint, foreignKey, integer, jsonb, pgTable, primaryKey, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { teams } from '../entries/tables';
import { events } from '../events/tables';

const at = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });

/**
 * What counts now: one row per event, team and part. Parts are the event module's own, and the
 * part `status` that every event has (did not start, disqualified).
 */
export const readings = pgTable(
  'readings',
  {
    orgId: uuid('org_id').notNull(),
    eventId: uuid('event_id').notNull(),
    teamId: uuid('team_id').notNull(),
    part: text('part').notNull(),
    /** 1 for the first kept value; a device says which version it typed against. */
    version: integer('version').notNull(),
    value: jsonb('value').$type<unknown>().notNull(),
    state: text('state', { enum: ['kept', 'checked'] }).notNull().default('kept'),
    keptAt: at('kept_at').notNull(),
    keptBy: uuid('kept_by').notNull(),
  },
  (t) => [
    primaryKey({ name: 'readings_pkey', columns: [t.orgId, t.eventId, t.teamId, t.part] }),
    foreignKey({ name: 'readings_event_fk', columns: [t.orgId, t.eventId], foreignColumns: [events.orgId, events.id] }),
    foreignKey({ name: 'readings_team_fk', columns: [t.orgId, t.teamId], foreignColumns: [teams.orgId, teams.id] }),
  ],
);

/** Every value ever kept, the present one included. Only added to. */
export const readingRevisions = pgTable(
  'reading_revisions',
  {
    orgId: uuid('org_id').notNull(),
    eventId: uuid('event_id').notNull(),
    teamId: uuid('team_id').notNull(),
    part: text('part').notNull(),
    version: integer('version').notNull(),
    value: jsonb('value').$type<unknown>().notNull(),
    /** Why a value was changed, in the words of whoever did. */
    reason: text('reason').notNull().default(''),
    keptAt: at('kept_at').notNull(),
    keptBy: uuid('kept_by').notNull(),
    deviceId: uuid('device_id').notNull(),
    deviceSequence: bigint('device_sequence', { mode: 'number' }).notNull(),
  },
  (t) => [primaryKey({ name: 'reading_revisions_pkey', columns: [t.orgId, t.eventId, t.teamId, t.part, t.version] })],
);

/** The answer to each key a device made, so that a repeat gets the same answer and no second effect. Only added to. */
export const keptRequests = pgTable(
  'kept_requests',
  {
    orgId: uuid('org_id').notNull(),
    key: uuid('key').notNull(),
    personId: uuid('person_id').notNull(),
    requestHash: text('request_hash').notNull(),
    answer: jsonb('answer').$type<unknown>().notNull(),
    at: at('at').notNull(),
  },
  (t) => [primaryKey({ name: 'kept_requests_pkey', columns: [t.orgId, t.key] })],
);

/** A finding someone settled, and why. The fingerprint is of the facts as they stood: other facts are another finding. */
export const settlements = pgTable(
  'settlements',
  {
    orgId: uuid('org_id').notNull(),
    id: uuid('id').notNull(),
    eventId: uuid('event_id').notNull(),
    teamId: uuid('team_id'),
    /** The finding's kind, such as `missing`. */
    kind: text('kind').notNull(),
    fingerprint: text('fingerprint').notNull(),
    /** What was decided: `did-not-start`, `counts-as-nothing` or `stands`. */
    outcome: text('outcome').notNull(),
    reason: text('reason').notNull(),
    settledAt: at('settled_at').notNull(),
    settledBy: uuid('settled_by').notNull(),
  },
  (t) => [
    primaryKey({ name: 'settlements_pkey', columns: [t.orgId, t.id] }),
    uniqueIndex('settlements_finding_key').on(t.orgId, t.eventId, t.kind, t.fingerprint),
    foreignKey({ name: 'settlements_event_fk', columns: [t.orgId, t.eventId], foreignColumns: [events.orgId, events.id] }),
  ],
);
