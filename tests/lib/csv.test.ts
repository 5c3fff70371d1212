import { expect, test } from 'vitest';
import { csvText } from '../../src/lib/csv.ts';

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
    `"'=HYPERLINK(""https://host.example"")",'@sum,'-1 dB,-1\r\n`,
  );
});
