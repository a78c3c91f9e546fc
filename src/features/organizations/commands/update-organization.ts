import { eq } from 'drizzle-orm';
import { withScope } from '~/server/database';
import { announce, orgTopic, tournamentTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { tournaments } from '../../tournaments/tables';
import { requireOwner } from '../policy';
import { getOrganization } from '../queries';
import type { UpdateOrganization } from '../schema';
import { organizations } from '../tables';

/**
 * Change the organization's name, time zone, currency or contact.
 *
 * @throws AppError not-allowed
 */
export async function updateOrganization(scope: Scope, input: UpdateOrganization): Promise<void> {
  requireOwner(scope);
  const ids = await withScope(scope, async (tx) => {
    const { name, timeZone, currency, contact } = await getOrganization(tx, scope);
    await tx.update(organizations).set(input).where(eq(organizations.orgId, scope.orgId));
    await writeAudit(tx, scope, { action: 'organization.changed', subjectType: 'organization', subjectId: scope.orgId, detail: { before: { name, timeZone, currency, contact }, after: input } });
    return tx.select({ id: tournaments.id }).from(tournaments).where(eq(tournaments.orgId, scope.orgId));
  });
  announce(orgTopic(scope.orgId));
  // The name, the zone and the contact stand on every tournament's public pages.
  for (const { id } of ids) announce(tournamentTopic(scope.orgId, id));
}
