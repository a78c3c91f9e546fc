import { keepReading } from '~/features/scores/commands/keep-reading';
import { loadEntry } from '~/features/scores/loaders';
import { keepReadingInput } from '~/features/scores/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** The field of the event as the entry form shows it. */
export const GET = endpoint({
  access: only('director', 'leader'),
  handler: ({ scope, params }) => loadEntry(scope, params['event']!),
});

/** Keep one reading. */
export const POST = endpoint({
  access: only('director', 'leader'),
  input: keepReadingInput,
  handler: ({ scope, input, params }) => keepReading(scope, params['event']!, input),
});
