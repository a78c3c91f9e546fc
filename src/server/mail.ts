import { Resend } from 'resend';
import type { ReactElement } from 'react';
import { render } from '@react-email/render';
import { AppError } from './errors';
import { environment } from './environment';
import { singleton } from './singleton';

function resend(): Resend {
  return singleton('resend', () => {
    const env = environment();
    return new Resend(env.RESEND_API_KEY, env.RESEND_BASE_URL ? { baseUrl: env.RESEND_BASE_URL } : undefined);
  });
}

/** One line, whatever was typed: line breaks in a name can't add headers. */
function oneLine(text: string): string {
  return text.replace(/[\r\n\t\u0000-\u001f\u007f]+/g, ' ').trim();
}

/**
 * Send one mail. The idempotency key makes a second try after an unclear first one harmless.
 *
 * @param key `kind/entity-id`, unique for this mail
 * @throws AppError mail-down when the service can't take it now (the job tries again)
 */
export async function sendMail(key: string, to: string, subject: string, body: ReactElement): Promise<void> {
  const [html, text] = await Promise.all([render(body), render(body, { plainText: true })]);
  const { error } = await resend().emails.send(
    { from: environment().MAIL_FROM, to: [oneLine(to)], subject: oneLine(subject), html, text },
    { idempotencyKey: key },
  );
  if (error) throw new AppError('mail-down', `The mail service answered ${error.name}.`);
}
