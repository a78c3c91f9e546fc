import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { fieldError, notFound, uniqueViolation } from '~/server/errors';
import { newId } from '~/server/ids';
import { announce, tournamentTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { requireDirector } from '../../tournaments/policy';
import { getTournament, listDivisions } from '../../tournaments/queries';
import { listEvents } from '../queries';
import type { AddEvent } from '../schema';
import { events } from '../tables';

function slugOf(text: string): string {
  return (
    text
      .normalize('NFKD')
      .replace(/[\u0300-\u036f]/g, '')
      .toLowerCase()
      .replace(/[^a-z0-9]+/g, '-')
      .replace(/^-+|-+$/g, '')
      .slice(0, 60) || 'event'
  );
}

/**
 * Put an event into one or more divisions of the scope's tournament: one event each, set up, scored and handed in by itself.
 *
 * @throws AppError not-allowed, not-found, bad-input when a division has an event of that name
 */
export async function addEvent(scope: Scope, input: AddEvent): Promise<{ id: string; slug: string; divisionId: string }[]> {
  requireDirector(scope, scope.tournamentId);
  const added: { id: string; slug: string; divisionId: string }[] = [];
  try {
    await withScope(scope, async (tx) => {
      const tournament = await getTournament(tx, scope);
      const divisions = await listDivisions(tx, scope, tournament.id);
      const taken = new Set((await listEvents(tx, scope, tournament.id)).map((e) => e.slug));
      for (const divisionId of new Set(input.divisionIds)) {
        const division = divisions.find((d) => d.id === divisionId);
        if (!division) throw notFound();
        const base = slugOf(`${input.name}-${division.slug}`);
        let slug = base;
        for (let n = 2; taken.has(slug); n++) slug = `${base}-${n}`;
        taken.add(slug);
        const id = newId();
        await tx.insert(events).values({
          orgId: scope.orgId,
          id,
          tournamentId: tournament.id,
          divisionId,
          slug,
          name: input.name,
          moduleKey: input.moduleKey,
          room: input.room,
          isTrial: input.isTrial,
          createdAt: now(),
        });
        await writeAudit(tx, scope, {
          action: 'event.added',
          subjectType: 'event',
          subjectId: id,
          tournamentId: tournament.id,
          detail: { name: input.name, division: division.name, kind: input.moduleKey, trial: input.isTrial },
        });
        added.push({ id, slug, divisionId });
      }
    });
  } catch (error) {
    if (uniqueViolation(error) === 'events_name_key') throw fieldError('name', 'One of these divisions has an event of this name already.');
    throw error;
  }
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
  return added;
}
