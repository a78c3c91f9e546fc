import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { AppError, fieldError, uniqueViolation } from '~/server/errors';
import { newId } from '~/server/ids';
import { announce, orgTopic } from '~/server/live';
import { holds, type Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import type { CreateTournament } from '../schema';
import { tournaments } from '../tables';

/**
 * Add a tournament to the office's season; it stays a draft until it is published.
 *
 * @throws AppError not-allowed (owners only), bad-input when the address is taken
 */
export async function createTournament(scope: Scope, input: CreateTournament): Promise<{ id: string; slug: string }> {
  if (!holds(scope, 'owner')) throw new AppError('not-allowed', 'An owner of the organization adds tournaments.');
  const id = newId();
  try {
    await withScope(scope, async (tx) => {
      await tx.insert(tournaments).values({ ...input, orgId: scope.orgId, id, createdAt: now() });
      await writeAudit(tx, scope, { action: 'tournament.created', subjectType: 'tournament', subjectId: id, tournamentId: id, detail: { ...input } });
    });
  } catch (error) {
    if (uniqueViolation(error) === 'tournaments_slug_key') throw fieldError('slug', 'Another tournament has this address. Add the year, or the place.');
    throw error;
  }
  announce(orgTopic(scope.orgId));
  return { id, slug: input.slug };
}
