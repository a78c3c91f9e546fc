import fc from 'fast-check';
import Papa from 'papaparse';
import { describe, expect, it } from 'vitest';
import { CSV_BOM, csvLine, csvNumber, guardText, unguardText, writeCsv } from './csv';
import { DomainError } from './domain-error';

const parse = (text: string): string[][] => Papa.parse<string[]>(text, { delimiter: ',', newline: '\r\n' }).data.slice(0, -1);
/** Text with plenty of what makes trouble. */
const nasty = fc.string({ unit: fc.constantFrom(...'=+-@\t\r\n\0"\',; aé😀＝＠1'), maxLength: 8 });
const anyText = fc.oneof(nasty, fc.string({ unit: 'grapheme', maxLength: 12 }));

describe('writing, after RFC 4180 section 2', () => {
  it('ends every record with CRLF, the last one too (rules 1 and 2)', () => {
    expect(writeCsv(['field_name', 'other'], [['aaa', 'bbb'], ['zzz', 'yyy']], { bom: false })).toBe('field_name,other\r\naaa,bbb\r\nzzz,yyy\r\n');
  });
  it('quotes fields with line breaks, quotes and commas (rule 6)', () => expect(csvLine(['aaa', 'b\r\nbb', 'ccc'])).toBe('aaa,"b\r\nbb",ccc\r\n'));
  it('doubles a quote within a field (rule 7)', () => expect(csvLine(['aaa', 'b"bb', 'ccc'])).toBe('aaa,"b""bb",ccc\r\n'));
  it('keeps spaces as part of a field (rule 4)', () => expect(parse(csvLine([' a ', 'b']))).toEqual([[' a ', 'b']]));
  it('puts the byte order mark in front unless told not to', () => {
    expect(writeCsv(['Schöol'], []).startsWith(CSV_BOM)).toBe(true);
    expect(new TextEncoder().encode(writeCsv(['a'], [])).slice(0, 3)).toEqual(new Uint8Array([0xef, 0xbb, 0xbf]));
  });
  it('does not let a record of one empty field vanish', () => expect(parse(csvLine(['']))).toEqual([['']]));
  it('refuses a row that does not match the header', () => {
    expect(() => writeCsv(['a', 'b'], [['x']])).toThrow(expect.objectContaining({ code: 'bad-csv' }) as DomainError);
  });
});

describe('numbers', () => {
  it('stay numbers, minus signs and all', () => {
    expect(csvLine([-3, 12.5, 0, csvNumber('-0.05'), csvNumber('71.10'), null])).toBe('-3,12.5,0,-0.05,71.10,\r\n');
  });
  it.each(['=1', '1e3', '1;2', '', '1,5', '1\n'])('text that is none (%j) can’t pass as one', (text) => {
    expect(() => csvNumber(text)).toThrow(DomainError);
    expect(() => csvLine([{ decimal: text }])).toThrow(DomainError);
  });
  it.each([NaN, Infinity])('%s is refused', (value) => expect(() => csvLine([value])).toThrow(DomainError));
});

describe('cells that a spreadsheet would take for a formula', () => {
  it.each(['=1+1', '+1', '-1', '@SUM(A1)', '\tx', '\rx', '\nx', '\0x', '＝1', '＋1', '－1', '＠x', ' =1', '\u00a0@x', '\uFEFF=1'])('%j gets an apostrophe', (text) => {
    expect(guardText(text)).toBe(`'${text}`);
    expect(unguardText(guardText(text))).toBe(text);
  });
  it.each(['', 'Oak', "O'Neil", ' x', '1-2', 'a=b', "'quoted'", '10.5', '–'])('%j stays as it is', (text) => {
    expect(guardText(text)).toBe(text);
    expect(unguardText(text)).toBe(text);
  });

  it('come back through a parser as they went in, and none begins dangerously', () => {
    fc.assert(
      fc.property(fc.array(fc.array(anyText, { minLength: 3, maxLength: 3 }), { maxLength: 8 }), (rows) => {
        const back = parse(writeCsv(['a', 'b', 'c'], rows, { bom: false }));
        expect(back).toEqual([['a', 'b', 'c'], ...rows.map((row) => row.map(guardText))]);
        for (const cell of back.flat()) expect(cell).not.toMatch(/^(?:[\t\r\n\0]|[\s\0]*[=+\-@＝＋－＠])/);
      }),
      { numRuns: 500 },
    );
  });

  it('do not hide behind another separator', () => {
    // Opened where a semicolon separates, an unquoted one would begin a cell of its own.
    for (const delimiter of [';', '\t']) {
      const text = csvLine([`a${delimiter}=1+1`, 'b']);
      for (const cell of Papa.parse<string[]>(text, { delimiter }).data.flat()) expect(cell.startsWith('=')).toBe(false);
    }
  });
});
