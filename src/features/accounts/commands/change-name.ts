import { eq } from 'drizzle-orm';
import { withPerson } from '~/server/database';
import type { SignedIn } from '~/server/request-scope';
import { people } from '../tables';

/** Be called something else from now on. What was done before keeps the name that it was done under. */
export async function changeName(person: SignedIn, name: string): Promise<void> {
  await withPerson(person.personId, (tx) => tx.update(people).set({ name }).where(eq(people.id, person.personId)));
}
