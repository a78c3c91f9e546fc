import { loadReleaseFile } from '~/features/results/loaders';
import { only } from '~/server/access';
import { csvDownload, csvName } from '~/server/download';
import { endpoint } from '~/server/endpoint';

/** Every team and event of a release. */
export const GET = endpoint({
  access: only('director'),
  handler: async ({ scope, params, tournament }) => {
    const { header, rows } = await loadReleaseFile(scope, tournament, params['number']!);
    return csvDownload(csvName(tournament.slug, 'release', params['number']!), header, rows);
  },
});
