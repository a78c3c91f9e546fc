import { writeCsv, type CsvCell } from '~/domain/csv';

/** A CSV file to download (RFC 4180, UTF-8 with its mark), named for what it holds. */
export function csvDownload(name: string, header: readonly string[], rows: Iterable<readonly CsvCell[]>): Response {
  return new Response(writeCsv(header, rows), {
    headers: { 'content-type': 'text/csv; charset=utf-8; header=present', 'content-disposition': `attachment; filename="${name}"` },
  });
}

/** A file's name that any computer takes: 'larkwater-senior-release-2.csv'. */
export function csvName(...parts: string[]): string {
  return `${parts
    .join('-')
    .normalize('NFKD')
    .replace(/[\u0300-\u036f]/g, '')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-+|-+$/g, '')}.csv`;
}
