import { loadSchoolFile } from '~/features/results/loaders';
import { only } from '~/server/access';
import { csvDownload, csvName } from '~/server/download';
import { endpoint } from '~/server/endpoint';

/** The school's own teams, event by event, as a file. */
export const GET = endpoint({
  access: only('coach'),
  handler: async ({ scope, tournament }) => {
    const { header, rows, number } = await loadSchoolFile(scope, tournament);
    return csvDownload(csvName(tournament.slug, 'our teams', 'release', String(number)), header, rows);
  },
});
