import { withScope } from '~/server/database';
import { fieldError, uniqueViolation } from '~/server/errors';
import { newId } from '~/server/ids';
import { announce, tournamentTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { requireDirector } from '../policy';
import { getTournament, listDivisions } from '../queries';
import type { DivisionInput } from '../schema';
import { divisions } from '../tables';

/** An address part from a name: 'Junior High' gives 'junior-high'. */
function slugOf(name: string): string {
  return (
    name
      .normalize('NFKD')
      .replace(/[\u0300-\u036f]/g, '')
      .toLowerCase()
      .replace(/[^a-z0-9]+/g, '-')
      .replace(/^-+|-+$/g, '') || 'division'
  );
}

/** Words for a division's broken unique key, or the error itself. */
export function divisionProblem(error: unknown): unknown {
  const key = uniqueViolation(error);
  if (key === 'divisions_letter_key') return fieldError('letter', 'Another division has this letter.');
  if (key === 'divisions_slug_key') return fieldError('name', 'Another division has this name.');
  return error;
}

/**
 * Add a division to the scope's tournament.
 *
 * @throws AppError not-allowed, bad-input when its letter or name is taken
 */
export async function addDivision(scope: Scope, input: DivisionInput): Promise<{ id: string; slug: string }> {
  requireDirector(scope, scope.tournamentId);
  const id = newId();
  const slug = slugOf(input.name);
  try {
    await withScope(scope, async (tx) => {
      const tournament = await getTournament(tx, scope);
      const position = (await listDivisions(tx, scope, tournament.id)).length + 1;
      await tx.insert(divisions).values({ ...input, orgId: scope.orgId, id, slug, tournamentId: tournament.id, position });
      await writeAudit(tx, scope, { action: 'division.added', subjectType: 'division', subjectId: id, tournamentId: tournament.id, detail: { ...input } });
    });
  } catch (error) {
    throw divisionProblem(error);
  }
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
  return { id, slug };
}
