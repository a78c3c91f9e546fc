import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { fieldError, uniqueViolation } from '~/server/errors';
import { newId } from '~/server/ids';
import { foundingScope, type SignedIn } from '~/server/request-scope';
import { countTry } from '../../accounts/queries';
import { writeAudit } from '../../audit/queries';
import type { CreateOrganization } from '../schema';
import { addresses, memberships, organizations } from '../tables';

/**
 * Found an organization; whoever does is its first owner. Anybody with a confirmed address may.
 *
 * @throws AppError bad-input when the address is taken, too-many
 */
export async function createOrganization(founder: SignedIn, input: CreateOrganization): Promise<{ slug: string }> {
  await countTry('organization:person', founder.personId, 'You have created many organizations today.');
  const scope = foundingScope(founder, input.slug);
  const moment = now();
  try {
    await withScope(scope, async (tx) => {
      await tx.insert(addresses).values({ slug: input.slug, orgId: scope.orgId });
      await tx.insert(organizations).values({ ...input, orgId: scope.orgId, createdAt: moment });
      await tx.insert(memberships).values({ orgId: scope.orgId, id: newId(), personId: founder.personId, role: 'owner', createdAt: moment });
      await writeAudit(tx, scope, { action: 'organization.created', subjectType: 'organization', subjectId: scope.orgId, detail: { ...input } });
    });
  } catch (error) {
    if (uniqueViolation(error) === 'addresses_pkey') throw fieldError('slug', 'Another organization has this address. Add your region or town.');
    throw error;
  }
  return { slug: input.slug };
}
