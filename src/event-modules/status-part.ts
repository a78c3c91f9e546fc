/** The one part that every kind of event has: whether a team takes part. Without one, it does. */
import * as z from 'zod/mini';
import { checkValue, choiceField, textField, UNKNOWN_FIELDS, type Checked } from '~/domain/fields';
import { TEAM_STATUSES, type TeamStatus } from '~/domain/ranking/places';

/** Its key; no module's own part may have it. */
export const STATUS_PART = 'status';

export interface StatusValue {
  status: TeamStatus;
  /** Why; must be there for a disqualification. */
  note: string;
}

/** A status in words, as it stands in lists. */
export const STATUS_WORDS: Record<TeamStatus, string> = { scored: 'takes part', dns: 'did not start', dq: 'disqualified' };

/** Takes one complete status. */
export const statusSchema: z.ZodMiniType<StatusValue> = z
  .strictObject(
    {
      status: choiceField(TEAM_STATUSES, 'Choose whether the team takes part.'),
      note: textField(300, { tooLong: 'Keep the reason within 300 characters.' }),
    },
    { error: (issue) => (issue.code === 'unrecognized_keys' ? UNKNOWN_FIELDS : 'Choose whether the team takes part.') },
  )
  .check((ctx) => {
    if (ctx.value.status === 'dq' && ctx.value.note === '') {
      ctx.issues.push({ code: 'custom', message: 'Say why the team is disqualified: the reason is kept.', path: ['note'], input: ctx.value.note });
    }
  });

/** A stored status, or 'takes part' where none is stored or it can't be read. */
export function readStatus(value: unknown): StatusValue {
  const checked: Checked<StatusValue> = value === undefined ? { ok: false, fields: [] } : checkValue(statusSchema, value);
  return checked.ok ? checked.value : { status: 'scored', note: '' };
}
