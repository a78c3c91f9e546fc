import { CSV_BOM, csvLine } from '~/domain/csv';
import { dayOf, wallTimeOf } from '~/domain/time';
import { exportAudit } from '~/features/audit/loaders';
import { auditFilterInput } from '~/features/audit/schema';
import { only } from '~/server/access';
import { csvName } from '~/server/download';
import { endpoint } from '~/server/endpoint';

/** The audit trail as the filter narrows it, as CSV, sent while it is read. */
export const GET = endpoint({
  access: only('owner'),
  input: auditFilterInput,
  handler: ({ scope, org, input }) => {
    const chunks = exportAudit(scope, input, org.timeZone);
    const encoder = new TextEncoder();
    const body = new ReadableStream<Uint8Array>({
      start: (controller) => controller.enqueue(encoder.encode(CSV_BOM + csvLine(['Day', 'Time', 'Who', 'What', 'Details', 'Tournament', 'Action', 'Moment (UTC)', 'Entry']))),
      async pull(controller) {
        const { done, value } = await chunks.next();
        if (done) return controller.close();
        const lines = value.map((l) =>
          csvLine([dayOf(l.at, org.timeZone), wallTimeOf(l.at, org.timeZone), l.who, l.what, l.facts.join('; '), l.tournament ?? '', l.action, l.at.toISOString(), l.id]),
        );
        controller.enqueue(encoder.encode(lines.join('')));
      },
      cancel: async () => void (await chunks.return(undefined)),
    });
    return new Response(body, {
      headers: { 'content-type': 'text/csv; charset=utf-8; header=present', 'content-disposition': `attachment; filename="${csvName(org.slug, 'audit-trail')}"` },
    });
  },
});
