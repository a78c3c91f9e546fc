import { importPart } from '~/features/scores/commands/keep-reading';
import { importPartInput } from '~/features/scores/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Keep a part of many teams at once, all or none. */
export const POST = endpoint({
  access: only('director', 'leader'),
  input: importPartInput,
  limit: 1_048_576,
  handler: ({ scope, input, params }) => importPart(scope, params['event']!, input),
});
