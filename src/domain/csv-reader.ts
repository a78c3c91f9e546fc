/**
 * Reading CSV with patience, so that what a volunteer saved in a spreadsheet goes in, and what does not is named by row and
 * column. A file of its own, so that who only writes CSV does not fetch the parser.
 */
import Papa from 'papaparse';
import { CSV_BOM, unguardText } from './csv';

/** One column that a file to be read may have. */
export interface CsvColumn {
  key: string;
  /** As the template writes it. Matched without regard to case, blanks and punctuation. */
  header: string;
  /** Other headings to accept. */
  aliases?: readonly string[];
  /** The file is refused without it. */
  required?: boolean;
}

/** Something wrong at one place of a file, for a person to find it. */
export interface CsvProblem {
  code: 'empty' | 'not-csv' | 'missing-column' | 'double-column' | 'too-many-cells' | 'broken-quotes' | 'too-many-rows';
  /** As the spreadsheet numbers it: the header is row 1. */
  row: number;
  /** As the spreadsheet letters it, where one column is meant. */
  column: string | null;
  message: string;
}

export interface CsvRow {
  /** As the spreadsheet numbers it: the header is row 1. */
  row: number;
  /** Text per column key, trimmed; '' where the cell is empty or the column is not there. */
  cells: Record<string, string>;
}

export interface CsvTable {
  rows: CsvRow[];
  problems: CsvProblem[];
  delimiter: ',' | ';' | '\t';
  /** Where each known column stands: key to spreadsheet letter. */
  letters: Record<string, string>;
  /** Headings that mean nothing here. */
  ignored: string[];
}

/** A, B, … Z, AA: how a spreadsheet letters column `index` (from 0). */
export function columnLetter(index: number): string {
  const rest = Math.floor(index / 26) - 1;
  return (rest >= 0 ? columnLetter(rest) : '') + String.fromCharCode(65 + (index % 26));
}

const sameHeading = (heading: string): string => heading.normalize('NFKC').toLowerCase().replace(/[^\p{L}\p{N}]+/gu, '');

/**
 * Text of an uploaded file: UTF-8, or UTF-16 with its mark, or else the older Western encoding that spreadsheets still write.
 */
export function decodeCsv(bytes: Uint8Array): string {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return new TextDecoder('utf-16le').decode(bytes);
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return new TextDecoder('utf-16be').decode(bytes);
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    return new TextDecoder('windows-1252').decode(bytes);
  }
}

/**
 * Reads a file with a header row. Commas, semicolons or tabs, with or without a byte order mark, columns in any order, blank rows
 * passed over, a guarding apostrophe taken off. Nothing is thrown: whatever is wrong is in `problems`, and the rows that could be
 * read are there as well.
 */
export function readCsv(text: string, columns: readonly CsvColumn[], options: { maxRows?: number } = {}): CsvTable {
  const maxRows = options.maxRows ?? 10_000;
  const table: CsvTable = { rows: [], problems: [], delimiter: ',', letters: {}, ignored: [] };
  const body = text.startsWith(CSV_BOM) ? text.slice(1) : text;
  const problem = (code: CsvProblem['code'], row: number, column: string | null, message: string): void => {
    table.problems.push({ code, row, column, message });
  };

  if (body.includes('\0')) {
    problem('not-csv', 1, null, 'This is not a CSV file. In the spreadsheet, choose “Save as” and then CSV.');
    return table;
  }
  if (body.trim() === '') {
    problem('empty', 1, null, 'The file is empty.');
    return table;
  }

  const known = new Map<string, CsvColumn>();
  for (const column of columns) for (const heading of [column.header, ...(column.aliases ?? [])]) known.set(sameHeading(heading), column);
  const parse = (delimiter: string, preview: number) => Papa.parse<string[]>(body, { delimiter, preview, skipEmptyLines: false });
  const hits = (delimiter: string): number =>
    new Set(parse(delimiter, 1).data[0]?.map((heading) => known.get(sameHeading(heading))).filter(Boolean)).size;
  // The separator under which most headings are known; a comma when none is better.
  for (const candidate of [';', '\t'] as const) if (hits(candidate) > hits(table.delimiter)) table.delimiter = candidate;

  const parsed = parse(table.delimiter, 0);
  const [header = [], ...records] = parsed.data;
  const keys: (string | null)[] = [];
  header.forEach((heading, i) => {
    const column = known.get(sameHeading(heading));
    keys.push(column?.key ?? null);
    if (column === undefined) {
      if (heading.trim() !== '') table.ignored.push(heading.trim());
    } else if (table.letters[column.key] === undefined) {
      table.letters[column.key] = columnLetter(i);
    } else {
      keys[i] = null;
      problem('double-column', 1, columnLetter(i), `There are two columns “${column.header}”: ${table.letters[column.key]} and ${columnLetter(i)}.`);
    }
  });
  for (const column of columns) {
    if (column.required === true && table.letters[column.key] === undefined) {
      problem('missing-column', 1, null, `There is no column “${column.header}”. Its heading belongs in row 1.`);
    }
  }
  for (const error of parsed.errors) {
    if (error.type === 'Quotes') {
      problem('broken-quotes', (error.row ?? 0) + 1, null, 'A quotation mark is opened and not closed, or stands in the middle of a cell.');
    }
  }

  records.forEach((record, i) => {
    if (record.every((cell) => cell.trim() === '')) return;
    const row = i + 2;
    if (table.rows.length >= maxRows) {
      if (table.rows.length === maxRows && !table.problems.some(({ code }) => code === 'too-many-rows')) {
        problem('too-many-rows', row, null, `There are more than ${maxRows} rows.`);
      }
      return;
    }
    const extra = record.findIndex((cell, at) => at >= header.length && cell.trim() !== '');
    if (extra >= 0) problem('too-many-cells', row, columnLetter(extra), 'This cell has no heading above it. A comma in a cell needs quotation marks round the cell.');
    const cells: Record<string, string> = Object.fromEntries(columns.map(({ key }) => [key, '']));
    keys.forEach((key, at) => {
      if (key !== null) cells[key] = unguardText((record[at] ?? '').trim());
    });
    table.rows.push({ row, cells });
  });
  if (table.rows.length === 0 && table.problems.length === 0) problem('empty', 1, null, 'There are headings, but no rows under them.');
  return table;
}
