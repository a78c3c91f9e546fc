import { whyGuessed } from '~/server/common-passwords';
import { fieldError } from '~/server/errors';

/** Refuse a new password that would be guessed. @throws AppError bad-input beside the field */
export async function requireGoodPassword(password: string, person: { name: string; email: string }): Promise<void> {
  const why = await whyGuessed(password, [person.email, person.name]);
  if (why) throw fieldError('password', why);
}
