import { z } from 'zod';
import { SETTLEMENT_OUTCOMES } from './types';

const uuid = (message: string) => z.string(message).regex(/^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/, message);
const TRY_AGAIN = 'Something here does not belong to this form. Load the page again.';
const reason = z
  .string()
  .trim()
  .max(300, 'Keep the reason within 300 characters.')
  .regex(/^[^\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f]*$/, 'This holds a character that can’t be kept. Type it again.');

/** One reading on its way from a device. */
export const keepReadingInput = z.strictObject({
  teamId: uuid('Choose the team.'),
  part: z.string(TRY_AGAIN).regex(/^[a-z][a-z-]{0,30}$/, TRY_AGAIN),
  /** What the module's own schema takes. */
  value: z.unknown(),
  /** The version it was typed against; 0 where none was there. */
  baseVersion: z.int(TRY_AGAIN).min(0).max(1_000_000),
  /** The set-up it was typed under. */
  setupVersion: z.int(TRY_AGAIN).min(1).max(1_000_000),
  /** Made on the device, once for this reading: a repeat gets the same answer. */
  key: uuid(TRY_AGAIN),
  device: uuid(TRY_AGAIN),
  /** Goes up with each reading of the device. */
  sequence: z.int(TRY_AGAIN).min(1).max(Number.MAX_SAFE_INTEGER),
  /** Why it was changed. */
  reason: reason.default(''),
});
export type KeepReading = z.infer<typeof keepReadingInput>;

/** Points of many teams at once, from a file. */
export const importPartInput = z.strictObject({
  part: keepReadingInput.shape.part,
  setupVersion: keepReadingInput.shape.setupVersion,
  device: keepReadingInput.shape.device,
  rows: z
    .array(
      z.strictObject({
        teamId: keepReadingInput.shape.teamId,
        value: z.unknown(),
        baseVersion: keepReadingInput.shape.baseVersion,
        key: keepReadingInput.shape.key,
        sequence: keepReadingInput.shape.sequence,
      }),
    )
    .min(1, 'There is nothing to keep in this file.')
    .max(2_000, 'Keep at most 2,000 teams at once.'),
});
export type ImportPart = z.infer<typeof importPartInput>;

export const settleInput = z.strictObject({
  teamId: uuid('Choose the team.'),
  fingerprint: z.string(TRY_AGAIN).max(300, TRY_AGAIN),
  outcome: z.enum(SETTLEMENT_OUTCOMES, 'Choose how it is settled.'),
  reason: reason.min(1, 'Say why in a few words: the reason is kept.'),
});
export type Settle = z.infer<typeof settleInput>;

export const unsettleInput = z.strictObject({ settlementId: uuid(TRY_AGAIN) });

/** A reason that must be there. */
export const reasonInput = z.strictObject({ reason: reason.min(1, 'Say why in a few words: the reason is kept.') });

export const nothingInput = z.strictObject({});
