import { z } from 'zod';
import { loadTemplate } from '~/features/scores/loaders';
import { only } from '~/server/access';
import { csvDownload, csvName } from '~/server/download';
import { endpoint } from '~/server/endpoint';

/** The file to fill in, with the teams in it. */
export const GET = endpoint({
  access: only('director', 'leader'),
  input: z.strictObject({ part: z.string().max(30).default('test') }),
  handler: async ({ scope, input, params }) => {
    const file = await loadTemplate(scope, params['event']!, input.part);
    return csvDownload(csvName(...file.name), file.header, file.rows);
  },
});
