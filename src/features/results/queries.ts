import { and, desc, eq, lte, sql } from 'drizzle-orm';
import { getEventModule } from '~/event-modules/registry';
import { now } from '~/server/clock';
import type { Tx } from '~/server/database';
import type { Scope } from '~/server/scope';
import { people } from '../accounts/tables';
import { listTeams } from '../entries/queries';
import { listEvents } from '../events/queries';
import type { EventRow } from '../events/types';
import { assembleField } from '../scores/assembly';
import { keptReadings, listSettlements } from '../scores/queries';
import type { Field } from '../scores/types';
import type { EventWithField } from './assembly';
import { releases } from './tables';
import type { Release, ReleaseRow } from './types';

const NOBODY = new Map();

/** An event's set-up as its module takes it: what was kept, or a new one while nothing was. */
export function setupOf(event: EventRow): unknown {
  return event.setup ?? getEventModule(event.moduleKey).setup.defaults();
}

/** The field of one event as it stands. */
export async function eventField(tx: Tx, scope: Scope, event: EventRow): Promise<Field> {
  const [teams, kept, settlements] = await Promise.all([
    listTeams(tx, scope, { tournamentId: event.tournamentId, divisionId: event.division.id }),
    keptReadings(tx, scope, { eventId: event.id }),
    listSettlements(tx, scope, { eventId: event.id }),
  ]);
  return assembleField(getEventModule(event.moduleKey), setupOf(event), event.division.letter, teams, kept.get(event.id) ?? NOBODY, settlements);
}

/** Every event of the tournament with its field, by name and then division. Four statements, whatever the number of events. */
export async function tournamentFields(tx: Tx, scope: Scope, tournamentId: string): Promise<EventWithField[]> {
  const [events, teams, kept, settlements] = await Promise.all([
    listEvents(tx, scope, tournamentId),
    listTeams(tx, scope, { tournamentId }),
    keptReadings(tx, scope, { tournamentId }),
    listSettlements(tx, scope, { tournamentId }),
  ]);
  return events.map((event) => ({
    event,
    field: assembleField(
      getEventModule(event.moduleKey),
      setupOf(event),
      event.division.letter,
      teams.filter((t) => t.divisionId === event.division.id),
      kept.get(event.id) ?? NOBODY,
      settlements.filter((s) => s.eventId === event.id),
    ),
  }));
}

/** Alone with every event of a tournament until the transaction ends, in an order that can't cross another's. */
export async function lockTournament(tx: Tx, scope: Scope, tournamentId: string): Promise<void> {
  await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${tournamentId}::text, 4))`);
  await tx.execute(sql`
    select pg_advisory_xact_lock(hashtextextended(id::text, 1))
      from (select id from events where org_id = ${scope.orgId} and tournament_id = ${tournamentId} order by id) e`);
}

const columns = {
  id: releases.id,
  number: releases.number,
  publicLine: releases.publicLine,
  releasedAt: releases.releasedAt,
  releasedBy: people.name,
  publicFrom: releases.publicFrom,
};

/** Every release of a tournament, newest first, without contents. */
export async function listReleases(tx: Tx, scope: Scope, tournamentId: string): Promise<ReleaseRow[]> {
  return tx
    .select(columns)
    .from(releases)
    .innerJoin(people, eq(people.id, releases.releasedBy))
    .where(and(eq(releases.orgId, scope.orgId), eq(releases.tournamentId, tournamentId)))
    .orderBy(desc(releases.number));
}

/** A release by number, or the newest; null when there is none. */
export async function getRelease(tx: Tx, scope: Scope, tournamentId: string, which: number | 'newest' | 'public'): Promise<Release | null> {
  const [row] = await tx
    .select({ ...columns, snapshot: releases.snapshot })
    .from(releases)
    .innerJoin(people, eq(people.id, releases.releasedBy))
    .where(
      and(
        eq(releases.orgId, scope.orgId),
        eq(releases.tournamentId, tournamentId),
        typeof which === 'number' ? eq(releases.number, which) : undefined,
        which === 'public' ? lte(releases.publicFrom, now()) : undefined,
      ),
    )
    .orderBy(desc(releases.number))
    .limit(1);
  return row ?? null;
}
