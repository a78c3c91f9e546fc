import { and, eq } from 'drizzle-orm';
import { checkValue } from '~/domain/fields';
import { getEventModule } from '~/event-modules/registry';
import { withScope } from '~/server/database';
import { AppError } from '~/server/errors';
import { announce, tournamentTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { requireLeader } from '../../events/policy';
import { getEventBySlug } from '../../events/queries';
import { events } from '../../events/tables';
import { lockEvent } from '../queries';

/**
 * Keep an event's set-up as a new version; the kind of event itself reads it.
 *
 * @returns the new version, and what is unlikely in it
 * @throws AppError bad-input with one message a field, conflict when it was changed meanwhile, out-of-order when it is locked
 */
export async function keepSetup(scope: Scope, input: { eventSlug: string; setup: unknown; baseVersion: number }): Promise<{ version: number; setup: unknown }> {
  const result = await withScope(scope, async (tx) => {
    const seen = await getEventBySlug(tx, scope, input.eventSlug);
    requireLeader(scope, seen);
    await lockEvent(tx, seen.id);
    const event = await getEventBySlug(tx, scope, input.eventSlug);
    if (event.state !== 'open') throw new AppError('out-of-order', 'This event is handed in: its set-up stays as it is.');
    if (event.setupLockedAt) throw new AppError('out-of-order', 'This set-up is locked. Unlock it first.');
    if (event.setupVersion !== input.baseVersion) {
      throw new AppError('conflict', 'Somebody else kept this set-up meanwhile. Load the page again to see theirs; yours is still here.');
    }
    const checked = checkValue(getEventModule(event.moduleKey).setup.schema, input.setup);
    if (!checked.ok) {
      throw new AppError('bad-input', checked.fields.length === 1 ? checked.fields[0]!.message : `${checked.fields.length} things need another look.`, {
        fields: checked.fields.map((f) => ({ path: `setup${f.path === '' ? '' : '.'}${f.path}`, message: f.message })),
      });
    }
    const version = event.setupVersion + 1;
    await tx
      .update(events)
      .set({ setup: checked.value, setupVersion: version })
      .where(and(eq(events.orgId, scope.orgId), eq(events.id, event.id)));
    await writeAudit(tx, scope, {
      action: 'setup.kept',
      subjectType: 'event',
      subjectId: event.id,
      tournamentId: event.tournamentId,
      detail: { version, before: event.setup, after: checked.value },
    });
    return { version, setup: checked.value, tournamentId: event.tournamentId };
  });
  announce(tournamentTopic(scope.orgId, result.tournamentId));
  return { version: result.version, setup: result.setup };
}
