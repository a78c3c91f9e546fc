import { withScope } from '~/server/database';
import { isId } from '~/server/ids';
import type { Scope } from '~/server/scope';
import { requireOwner } from '../organizations/policy';
import { auditLine } from './assembly';
import { AUDIT_PAGE } from './constants';
import { countAudit, listAudit, listAuditChoices } from './queries';
import type { AuditCursor, AuditFilter, AuditLine, AuditRow } from './types';

/** Counting stops here. */
const COUNTED_TO = 10_001;
const CHUNK = 1_000;

/** A cursor as it stands in an address, or null when it is none. */
function readCursor(text: string | null): AuditCursor | null {
  const [at, id] = (text ?? '').split('_');
  const ms = Number(at);
  return at && Number.isSafeInteger(ms) && Math.abs(ms) < 8.64e15 && isId(id) ? { at: new Date(ms), id } : null;
}

/**
 * A page of the audit trail, latest first. `before` is what the page before gave as `older`.
 *
 * @throws AppError not-allowed (owners only)
 */
export async function loadAudit(
  scope: Scope,
  filter: AuditFilter,
  zone: string,
  before: string | null,
): Promise<{ lines: AuditLine[]; older: string | null; total: number; isMore: boolean; people: { value: string; label: string }[]; tournaments: { value: string; label: string }[] }> {
  requireOwner(scope);
  return withScope(scope, async (tx) => {
    const rows = await listAudit(tx, scope, filter, zone, readCursor(before), AUDIT_PAGE + 1);
    const total = await countAudit(tx, scope, filter, zone, COUNTED_TO);
    const last = rows.length > AUDIT_PAGE ? rows[AUDIT_PAGE - 1]! : null;
    return {
      lines: rows.slice(0, AUDIT_PAGE).map(auditLine),
      older: last && `${last.at.getTime()}_${last.id}`,
      total: Math.min(total, COUNTED_TO - 1),
      isMore: total === COUNTED_TO,
      ...(await listAuditChoices(tx, scope)),
    };
  });
}

/**
 * Everything that fits, latest first, a thousand entries at a time, each in a transaction of its own: a long download holds no
 * connection, and its size costs no memory.
 *
 * @throws AppError not-allowed (owners only)
 */
export async function* exportAudit(scope: Scope, filter: AuditFilter, zone: string): AsyncGenerator<(AuditLine & { action: string })[]> {
  requireOwner(scope);
  let cursor: AuditCursor | null = null;
  for (;;) {
    const from: AuditCursor | null = cursor;
    const rows: AuditRow[] = await withScope(scope, (tx) => listAudit(tx, scope, filter, zone, from, CHUNK));
    if (rows.length > 0) yield rows.map((r) => ({ ...auditLine(r), action: r.action }));
    if (rows.length < CHUNK) return;
    const last = rows.at(-1)!;
    cursor = { at: last.at, id: last.id };
  }
}
