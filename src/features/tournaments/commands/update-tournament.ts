import { and, eq } from 'drizzle-orm';
import { withScope } from '~/server/database';
import { announce, orgTopic, tournamentTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { requireDirector } from '../policy';
import { getTournament } from '../queries';
import { tournaments } from '../tables';
import type { DayPlanLine } from '../types';

/** What may be changed of a tournament, in any combination. */
export type TournamentChange = Partial<{
  name: string;
  shortName: string;
  day: string;
  startsAt: string;
  endsAt: string;
  venue: string;
  venueNote: string;
  summary: string;
  dayPlan: DayPlanLine[];
  isPublished: boolean;
  dropWorst: number;
  advance: number;
  perSchool: number;
}>;

/**
 * Change the tournament that the scope names: particulars, plan of the day, rules for totals, published or not.
 *
 * @throws AppError not-allowed, not-found
 */
export async function updateTournament(scope: Scope, change: TournamentChange): Promise<void> {
  requireDirector(scope, scope.tournamentId);
  await withScope(scope, async (tx) => {
    const before = await getTournament(tx, scope);
    await tx
      .update(tournaments)
      .set(change)
      .where(and(eq(tournaments.orgId, scope.orgId), eq(tournaments.id, before.id)));
    const action = change.isPublished === undefined ? 'tournament.changed' : change.isPublished ? 'tournament.published' : 'tournament.withdrawn';
    await writeAudit(tx, scope, {
      action,
      subjectType: 'tournament',
      subjectId: before.id,
      tournamentId: before.id,
      detail: { before: Object.fromEntries(Object.keys(change).map((k) => [k, before[k as keyof TournamentChange]])), after: change },
    });
  });
  announce(orgTopic(scope.orgId));
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
}
