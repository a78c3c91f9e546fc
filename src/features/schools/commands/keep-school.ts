import { and, eq } from 'drizzle-orm';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { AppError, fieldError, uniqueViolation } from '~/server/errors';
import { newId } from '~/server/ids';
import { announce, orgTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { canKeepSchools } from '../policy';
import { getSchoolInScope } from '../queries';
import type { SchoolInput } from '../schema';
import { schools } from '../tables';

function requireKeeper(scope: Scope): void {
  if (!canKeepSchools(scope)) throw new AppError('not-allowed', 'The office keeps the list of schools.');
}

async function named<T>(work: Promise<T>): Promise<T> {
  try {
    return await work;
  } catch (error) {
    if (uniqueViolation(error) === 'schools_name_key') throw fieldError('name', 'A school of this name is in the list already.');
    throw error;
  }
}

/** Add a school to the organization's list. @throws AppError not-allowed, bad-input when the name is taken */
export async function addSchool(scope: Scope, input: SchoolInput): Promise<{ id: string }> {
  requireKeeper(scope);
  const id = newId();
  await named(
    withScope(scope, async (tx) => {
      await tx.insert(schools).values({ orgId: scope.orgId, id, ...input, createdAt: now() });
      await writeAudit(tx, scope, { action: 'school.added', subjectType: 'school', subjectId: id, detail: { ...input } });
    }),
  );
  announce(orgTopic(scope.orgId));
  return { id };
}

/** Rename a school or correct its town. @throws AppError not-allowed, not-found, bad-input when the name is taken */
export async function changeSchool(scope: Scope, id: string, input: SchoolInput): Promise<void> {
  requireKeeper(scope);
  await named(
    withScope(scope, async (tx) => {
      const before = await getSchoolInScope(tx, scope, id);
      await tx
        .update(schools)
        .set(input)
        .where(and(eq(schools.orgId, scope.orgId), eq(schools.id, id)));
      await writeAudit(tx, scope, { action: 'school.changed', subjectType: 'school', subjectId: id, detail: { before: { name: before.name, town: before.town }, after: input } });
    }),
  );
  announce(orgTopic(scope.orgId));
}
