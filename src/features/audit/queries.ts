import { newId } from '~/server/ids';
import { now } from '~/server/clock';
import type { Tx } from '~/server/database';
import type { Scope } from '~/server/scope';
import { auditEntries } from './tables';

/** What an audit row tells. */
export interface AuditNote {
  /** The command's noun and verb: `tournament.created`. */
  action: string;
  subjectType: string;
  subjectId: string | null;
  tournamentId?: string | null;
  /** Before and after or whatever tells the story; no secrets, no students' data. */
  detail?: Record<string, unknown>;
}

/** Write the audit row of a command, in the command's own transaction. */
export async function writeAudit(tx: Tx, scope: Scope, note: AuditNote): Promise<void> {
  await tx.insert(auditEntries).values({
    orgId: scope.orgId,
    id: newId(),
    at: now(),
    actorId: scope.actor.personId,
    action: note.action,
    subjectType: note.subjectType,
    subjectId: note.subjectId,
    tournamentId: note.tournamentId ?? null,
    detail: note.detail ?? {},
  });
}
