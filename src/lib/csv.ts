export type CsvValue = string | number;

/** What a spreadsheet would take for a formula. */
const formulaStart = /^[=+\-@\t\r]/;

const field = (value: CsvValue): string => {
  // Common practice, no source: an apostrophe keeps a spreadsheet from computing somebody else's text.
  const text = typeof value === 'string' && formulaStart.test(value) ? `'${value}` : String(value);
  // RFC 4180 section 2, rules 6 and 7.
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
};

/** Records as RFC 4180 has them, with line breaks of CR LF. */
export const csvText = (records: readonly (readonly CsvValue[])[]): string =>
  records.map((record) => `${record.map(field).join(',')}\r\n`).join('');
