import { loadDivisionFile } from '~/features/results/loaders';
import { csvDownload, csvName } from '~/server/download';
import { endpoint } from '~/server/endpoint';

/** The division's public results as a file. */
export const GET = endpoint({
  access: 'public',
  handler: async ({ scope, params, tournament }) => {
    const { header, rows, number } = await loadDivisionFile(scope, params['division']!);
    return csvDownload(csvName(tournament.slug, params['division']!, 'release', String(number)), header, rows);
  },
});
