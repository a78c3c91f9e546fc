import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CSV_BOM, unguardText, writeCsv } from './csv';
import { columnLetter, decodeCsv, readCsv, type CsvColumn } from './csv-reader';

const anyText = fc.oneof(
  fc.string({ unit: fc.constantFrom(...'=+-@\t\r\n\0"\',; aé😀＝＠1'), maxLength: 8 }),
  fc.string({ unit: 'grapheme', maxLength: 12 }),
);

const COLUMNS: CsvColumn[] = [
  { key: 'team', header: 'Team', aliases: ['Team number'], required: true },
  { key: 'points', header: 'Test points', required: true },
  { key: 'note', header: 'Note' },
];

describe('reading', () => {
  it.each([
    ['commas', 'Team,Test points\r\n7,12.5\r\n'],
    ['semicolons', 'Team;Test points\n7;12.5'],
    ['tabs', 'Team\tTest points\r7\t12.5\r'],
    ['a byte order mark', `${CSV_BOM}Team,Test points\n7,12.5\n`],
    ['other case, blanks and punctuation in headings', ' TEAM , test-points: \n7 , 12.5 '],
    ['another heading for the same column', 'Test points,Team Number\n12.5,7'],
    ['columns in any order and strange ones', 'Room,Test points,Team\nHall,12.5,7\n'],
    ['quotes', '"Team","Test points"\n"7","12.5"\n'],
    ['blank rows at the end', 'Team,Test points\n7,12.5\n\n ,\n,,\n'],
  ])('takes %s', (_, text) => {
    const table = readCsv(text, COLUMNS);
    expect(table.problems).toEqual([]);
    expect(table.rows).toEqual([{ row: 2, cells: { team: '7', points: '12.5', note: '' } }]);
  });

  it('keeps a decimal comma apart from the separator', () => {
    const table = readCsv('Team;Test points\n7;12,5\n', COLUMNS);
    expect(table).toMatchObject({ delimiter: ';', rows: [{ cells: { points: '12,5' } }] });
  });

  it('counts rows as the spreadsheet does, over blank rows and line breaks in cells', () => {
    const table = readCsv('Team,Test points,Note\n1,5,"two\nlines"\n\n3,7,x\n', COLUMNS);
    expect(table.rows.map(({ row }) => row)).toEqual([2, 4]);
    expect(table.rows[0]?.cells['note']).toBe('two\nlines');
  });

  it('names columns by letter and says which headings mean nothing', () => {
    expect(readCsv('Room,Test points,Team\nHall,12.5,7\n', COLUMNS)).toMatchObject({ letters: { points: 'B', team: 'C' }, ignored: ['Room'] });
    expect([0, 25, 26, 51, 52, 701, 702].map(columnLetter)).toEqual(['A', 'Z', 'AA', 'AZ', 'BA', 'ZZ', 'AAA']);
  });

  it.each([
    ['empty', '', 1, null],
    ['empty', ' \n ', 1, null],
    ['empty', 'Team,Test points\n', 1, null],
    ['not-csv', 'PK\u0003\u0004\0\0', 1, null],
    ['missing-column', 'Team,Score\n7,1\n', 1, null],
    ['double-column', 'Team,Test points,team number\n7,1,8\n', 1, 'C'],
    ['too-many-cells', 'Team,Test points\n7,1\n8,12,5\n', 3, 'C'],
    ['broken-quotes', 'Team,Test points\n7,"1\n8,2\n', 2, null],
  ])('names what is wrong and where: %s', (code, text, row, column) => {
    const { problems } = readCsv(text, COLUMNS);
    expect(problems[0]).toMatchObject({ code, row, column });
    expect(problems[0]?.message).toMatch(/\.$/);
  });

  it('stops at the limit and says so once', () => {
    const table = readCsv(`Team,Test points\n${'1,2\n'.repeat(9)}`, COLUMNS, { maxRows: 3 });
    expect(table.rows).toHaveLength(3);
    expect(table.problems).toMatchObject([{ code: 'too-many-rows', row: 5 }]);
    // Blank rows don't use the limit up.
    expect(readCsv(`Team,Test points\n${'\n'.repeat(9)}1,2\n`, COLUMNS, { maxRows: 3 })).toMatchObject({ rows: [{ row: 11 }], problems: [] });
    expect(readCsv(`Team,Test points\n${'1,2\n'.repeat(3)}\n`, COLUMNS, { maxRows: 3 }).problems).toEqual([]);
  });

  it('reads what was written, with its guarding apostrophes taken off', () => {
    const tidy = anyText.map((text) => text.replaceAll('\0', '').trim()).filter((text) => text !== '' && unguardText(text) === text);
    fc.assert(
      fc.property(fc.array(fc.record({ team: tidy, points: fc.integer(), note: tidy }), { minLength: 1, maxLength: 6 }), (rows) => {
        const text = writeCsv(['Team', 'Test points', 'Note'], rows.map(({ team, points, note }) => [team, points, note]));
        const table = readCsv(text, COLUMNS);
        expect(table.problems).toEqual([]);
        expect(table.rows.map(({ cells }) => cells)).toEqual(rows.map((row) => ({ ...row, points: String(row.points) })));
      }),
    );
  });

  it('never throws, whatever it is given', () => {
    fc.assert(fc.property(anyText, fc.string({ unit: 'binary' }), (a, b) => {
      expect(Array.isArray(readCsv(`${a}Team;Test points${b}`, COLUMNS).rows)).toBe(true);
    }));
  });
});

describe('bytes', () => {
  const text = 'Team,Né\n';
  it.each([
    ['UTF-8', new TextEncoder().encode(text)],
    ['UTF-16, little end first', new Uint8Array([0xff, 0xfe, ...[...text].flatMap((c) => [c.charCodeAt(0) & 255, c.charCodeAt(0) >> 8])])],
    ['UTF-16, big end first', new Uint8Array([0xfe, 0xff, ...[...text].flatMap((c) => [c.charCodeAt(0) >> 8, c.charCodeAt(0) & 255])])],
    ['the older Western encoding', new Uint8Array([...text].map((c) => c.charCodeAt(0)))],
  ])('are read as %s', (_, bytes) => expect(decodeCsv(bytes)).toBe(text));
});
