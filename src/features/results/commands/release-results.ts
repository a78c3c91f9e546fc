import { momentAt } from '~/domain/time';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { AppError, fieldError } from '~/server/errors';
import { newId } from '~/server/ids';
import { announce, orgTopic, tournamentTopic } from '~/server/live';
import { personOf, type Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { requireDirector } from '../../tournaments/policy';
import { getTournament, listDivisions } from '../../tournaments/queries';
import { assembleSnapshot } from '../assembly';
import { obstaclesTo, snapshotMark } from '../policy';
import { listReleases, lockTournament, tournamentFields } from '../queries';
import type { ReleaseInput } from '../schema';
import { releases } from '../tables';

/**
 * Release the results: a numbered, frozen version of everything, from one consistent read with every event locked. The public
 * sees it at once or from the moment given.
 *
 * @param zone the organization's, in which `at` is told
 * @throws AppError not-allowed, out-of-order when something stands in the way, conflict when the results are not those that were
 *   looked at, bad-input
 */
export async function releaseResults(scope: Scope, zone: string, input: ReleaseInput): Promise<{ number: number; publicFrom: Date }> {
  requireDirector(scope, scope.tournamentId);
  const result = await withScope(scope, async (tx) => {
    const tournament = await getTournament(tx, scope);
    await lockTournament(tx, scope, tournament.id);
    const [divisions, events, before] = await Promise.all([listDivisions(tx, scope, tournament.id), tournamentFields(tx, scope, tournament.id), listReleases(tx, scope, tournament.id)]);
    const [obstacle] = obstaclesTo(events);
    if (obstacle) throw new AppError('out-of-order', obstacle.words);
    const snapshot = assembleSnapshot({ dropWorst: tournament.dropWorst, advance: tournament.advance, perSchool: tournament.perSchool }, divisions, events);
    if (snapshotMark(snapshot) !== input.seen) throw new AppError('conflict', 'Something changed since you looked at these results. Look at them again, then release.');
    const number = (before[0]?.number ?? 0) + 1;
    if (number > 1 && input.publicLine === '') throw fieldError('publicLine', 'Say in a line what changed: it stands on the public page.');
    const moment = now();
    let publicFrom = moment;
    if (input.when === 'later') {
      if (!input.at) throw fieldError('at', 'Choose the day and the time from which the public sees them.');
      publicFrom = momentAt(input.at.slice(0, 10), input.at.slice(11), zone);
      if (publicFrom <= moment) throw fieldError('at', 'That is past. Choose a later time, or let the public see them now.');
      if (publicFrom.getTime() - moment.getTime() > 14 * 86_400_000) throw fieldError('at', 'Choose a time within the next two weeks.');
    }
    await tx.insert(releases).values({
      orgId: scope.orgId,
      id: newId(),
      tournamentId: tournament.id,
      number,
      publicLine: input.publicLine,
      snapshot,
      releasedAt: moment,
      releasedBy: personOf(scope),
      publicFrom,
    });
    await writeAudit(tx, scope, {
      action: 'results.released',
      subjectType: 'tournament',
      subjectId: tournament.id,
      tournamentId: tournament.id,
      detail: { number, publicLine: input.publicLine, publicFrom: publicFrom.toISOString(), events: events.length },
    });
    return { number, publicFrom };
  });
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
  announce(orgTopic(scope.orgId));
  return result;
}
