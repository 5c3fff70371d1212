import Papa from 'papaparse';

export type CsvValue = string | number;

/**
 * Records as RFC 4180 has them, with line breaks of CR LF. Text that a spreadsheet would take for a formula gets an apostrophe
 * before it (common practice, no source).
 */
export const csvText = (records: readonly (readonly CsvValue[])[]): string =>
  `${Papa.unparse(records as CsvValue[][], { newline: '\r\n', escapeFormulae: true })}\r\n`;

export type CsvRead =
  | { readonly ok: true; readonly heads: readonly string[]; readonly rows: readonly (readonly string[])[] }
  | { readonly ok: false; readonly problem: string };

// The apostrophe that csvText, or a spreadsheet, put before what looks like a formula.
const unescaped = (text: string): string => text.replace(/^'(?=[=+\-@\t\r])/, '');

/** What stands most often between the heads; a quoted head may hold the others. */
const delimiterOf = (text: string): string => {
  const heads = (text.split(/\r?\n/, 1)[0] ?? '').replace(/"[^"]*"/g, '');
  const count = (delimiter: string): number => heads.split(delimiter).length;
  return [';', '\t'].reduce((most, each) => (count(each) > count(most) ? each : most), ',');
};

/** Reads CSV with heads in its first line; comma, semicolon or tab between fields, whichever the file has. */
export const readCsv = (text: string): CsvRead => {
  const bare = text.replace(/^\uFEFF/, '');
  const { data, errors } = Papa.parse<string[]>(bare, { delimiter: delimiterOf(bare) });
  const quotes = errors.find(({ type }) => type === 'Quotes');
  if (quotes !== undefined)
    return {
      ok: false,
      problem: `Line ${(quotes.row ?? 0) + 1}: a quotation mark is not closed or stands in the middle of a field.`,
    };
  const [heads = [], ...rows] = data.map((row) => row.map(unescaped));
  while (rows.at(-1)?.every((field) => field.trim() === '') === true) rows.pop();
  if (heads.every((head) => head.trim() === ''))
    return {
      ok: false,
      problem: 'The first line has no heads: start the table with one that names its columns.',
    };
  return { ok: true, heads, rows };
};
