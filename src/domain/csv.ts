/** Writing CSV as spreadsheets and other programs take it: after RFC 4180, and safe to open. */
import { DomainError } from './domain-error';
import { isDecimalText } from './exact';

/** A number as exact decimal text, written as a number and never quoted. Made by {@link csvNumber} only. */
export interface CsvNumber {
  readonly decimal: string;
}

/** Text (guarded), a number (as it is), or nothing. */
export type CsvCell = string | number | CsvNumber | null;

/** UTF-8's byte order mark: spreadsheets then read the file as UTF-8. */
export const CSV_BOM = '\uFEFF';
const LINE_END = '\r\n';

/**
 * A number cell from exact decimal text.
 * @throws DomainError `bad-number` when it is not decimal text: a formula can't pass as a number.
 */
export function csvNumber(decimal: string): CsvNumber {
  if (!isDecimalText(decimal)) throw new DomainError('bad-number', 'A number cell needs decimal text.');
  return { decimal };
}

// What makes a spreadsheet take a cell for a formula: OWASP, "CSV Injection" (= + - @, tab, CR, LF and the full-width forms) and
// OWASP ASVS 5.0 requirement 1.2.10 (also NUL). Blanks before the sign are trimmed by some programs, so they don't hide it.
const FORMULA_START = /^(?:[\t\r\n\0]|[\s\0]*[=+\-@＝＋－＠])/;

/** Text that no spreadsheet takes for a formula: where it could be one, a leading apostrophe makes it text. */
export function guardText(text: string): string {
  return FORMULA_START.test(text) ? `'${text}` : text;
}

/** Takes the guarding apostrophe of {@link guardText} off again. Other text is left alone. */
export function unguardText(text: string): string {
  return text.startsWith("'") && FORMULA_START.test(text.slice(1)) ? text.slice(1) : text;
}

function cellText(cell: CsvCell): string {
  if (cell === null) return '';
  if (typeof cell === 'number') {
    if (!Number.isFinite(cell)) throw new DomainError('bad-number', 'A number cell needs a finite number.');
    return String(cell);
  }
  if (typeof cell !== 'string') return csvNumber(cell.decimal).decimal;
  const text = guardText(cell);
  // Semicolon and tab too: where they are the usual separator, an unquoted one would begin a new, unguarded cell.
  return /[",;\t\r\n\0]|^\s|\s$/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

/** One record with its line end (CRLF), RFC 4180 section 2. */
export function csvLine(cells: readonly CsvCell[]): string {
  const line = cells.map(cellText).join(',');
  // A record that is one empty field would read as a blank line.
  return (line === '' ? '""' : line) + LINE_END;
}

/**
 * A whole file: header line, then one line per row.
 * @param options.bom put UTF-8's byte order mark first (default true: spreadsheets need it to see UTF-8).
 * @throws DomainError `bad-csv` when a row has another number of cells than the header.
 */
export function writeCsv(header: readonly string[], rows: Iterable<readonly CsvCell[]>, options: { bom?: boolean } = {}): string {
  const lines = [csvLine(header)];
  for (const row of rows) {
    if (row.length !== header.length) throw new DomainError('bad-csv', 'A row has another number of cells than the header.');
    lines.push(csvLine(row));
  }
  return (options.bom === false ? '' : CSV_BOM) + lines.join('');
}
