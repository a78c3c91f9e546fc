import { z } from 'zod';

/** A set-up as typed; its own kind of event reads `setup`. */
export const keepSetupInput = z.strictObject({
  setup: z.unknown(),
  /** The version it was typed against; 0 when nothing was kept yet. */
  baseVersion: z.int().min(0),
});

export const lockSetupInput = z.strictObject({ version: z.int('Keep the set-up before you lock it.').min(1, 'Keep the set-up before you lock it.') });

export const unlockSetupInput = z.strictObject({
  reason: z.string('Say why in a few words.').trim().min(3, 'Say why in a few words: the reason is kept.').max(500, 'Keep the reason within 500 characters.'),
});
