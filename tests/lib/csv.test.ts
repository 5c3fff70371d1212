import { expect, test } from 'vitest';
import { csvText, readCsv } from '../../src/lib/csv.ts';

test('records end in CR LF, and fields with commas, quotes or line breaks are quoted (RFC 4180 section 2)', () => {
  expect(
    csvText([
      ['name', 'Mbit/s'],
      ['tickets, gates', 2.5],
      ['the "old" line\nto Skerry', 10],
    ]),
  ).toBe('name,Mbit/s\r\n"tickets, gates",2.5\r\n"the ""old"" line\nto Skerry",10\r\n');
});

test("somebody's text is never computed by a spreadsheet, and a negative number stays one", () => {
  expect(csvText([['=HYPERLINK("https://host.example")', '@sum', '-1 dB', -1]])).toBe(
    `"'=HYPERLINK(""https://host.example"")","'@sum","'-1 dB",-1\r\n`,
  );
});

test('reads back what it writes, formulas without their apostrophe', () => {
  const records = [
    ['Site', 'Notes'],
    ['Gullhaven', 'says "quay",\nsecond floor'],
    ['=1+1', '-'],
  ];
  expect(readCsv(csvText(records))).toEqual({ ok: true, heads: records[0], rows: records.slice(1) });
});

test('takes semicolons, a byte order mark and empty lines at the end', () => {
  expect(readCsv('\uFEFFSite;Notes\r\nSkerry;"a; b"\r\n\r\n;\r\n')).toEqual({
    ok: true,
    heads: ['Site', 'Notes'],
    rows: [['Skerry', 'a; b']],
  });
});

test('refuses a quotation mark that is never closed, and a table without heads', () => {
  expect(readCsv('Site,Notes\nSkerry,"a')).toEqual({
    ok: false,
    problem: expect.stringMatching(/^Line 2: /) as string,
  });
  expect(readCsv(',\nSkerry,a')).toEqual({ ok: false, problem: expect.stringMatching(/no heads/) as string });
});
