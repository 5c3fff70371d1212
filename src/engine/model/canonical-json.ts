/**
 * A JSON value as the one text that stands for all values that say the same (RFC 8785): members by the UTF-16 code units of
 * their names, no white space. Members that are undefined are left out, as JSON does.
 */
export const canonicalJson = (value: unknown): string => {
  if (Array.isArray(value)) return `[${value.map((item) => canonicalJson(item ?? null)).join(',')}]`;
  // RFC 8785, 3.2.2: numbers and strings as ECMAScript writes them.
  if (typeof value !== 'object' || value === null) return JSON.stringify(value);
  const members = Object.entries(value)
    .filter(([, member]) => member !== undefined)
    .sort(([a], [b]) => (a < b ? -1 : 1))
    .map(([name, member]) => `${JSON.stringify(name)}:${canonicalJson(member)}`);
  return `{${members.join(',')}}`;
};
