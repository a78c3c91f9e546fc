import { and, asc, eq } from 'drizzle-orm';
import type { Tx } from '~/server/database';
import { notFound } from '~/server/errors';
import type { Scope } from '~/server/scope';
import { divisions, tournaments } from './tables';
import type { DivisionRow } from './types';

/** The whole row of the tournament that the address names. @throws AppError not-found */
export async function getTournament(tx: Tx, scope: Scope): Promise<typeof tournaments.$inferSelect> {
  if (!scope.tournamentId) throw notFound();
  return getTournamentInScope(tx, scope, scope.tournamentId);
}

/** A tournament by id; missing and foreign look alike. @throws AppError not-found */
export async function getTournamentInScope(tx: Tx, scope: Scope, tournamentId: string): Promise<typeof tournaments.$inferSelect> {
  const [row] = await tx.select().from(tournaments).where(and(eq(tournaments.orgId, scope.orgId), eq(tournaments.id, tournamentId)));
  if (!row) throw notFound();
  return row;
}

/** The tournament's divisions in their order. */
export async function listDivisions(tx: Tx, scope: Scope, tournamentId: string): Promise<DivisionRow[]> {
  return tx
    .select({
      id: divisions.id,
      slug: divisions.slug,
      name: divisions.name,
      letter: divisions.letter,
      shape: divisions.shape,
      position: divisions.position,
    })
    .from(divisions)
    .where(and(eq(divisions.orgId, scope.orgId), eq(divisions.tournamentId, tournamentId)))
    .orderBy(asc(divisions.position), asc(divisions.name));
}

/** A division of the tournament by id. @throws AppError not-found */
export async function getDivisionInScope(tx: Tx, scope: Scope, tournamentId: string, divisionId: string): Promise<DivisionRow> {
  const found = (await listDivisions(tx, scope, tournamentId)).find((d) => d.id === divisionId);
  if (!found) throw notFound();
  return found;
}
