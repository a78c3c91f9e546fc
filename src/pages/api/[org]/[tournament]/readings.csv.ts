import { loadEveryReading } from '~/features/scores/loaders';
import { only } from '~/server/access';
import { csvDownload, csvName } from '~/server/download';
import { endpoint } from '~/server/endpoint';

/** Everything that was ever kept, with who, when and why. */
export const GET = endpoint({
  access: only('director'),
  handler: async ({ scope, tournament }) => {
    const file = await loadEveryReading(scope);
    return csvDownload(csvName(tournament.slug, ...file.name), file.header, file.rows);
  },
});
