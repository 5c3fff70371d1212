// Plans are read by many: a key that somebody pastes into words is known to all of them. What follows can't tell every key,
// only what looks like nothing else.

const labelled =
  /\b(?:pre[- ]?shared[- ]?key|psk|pass(?:word|phrase|wd)|secret)\b(?:\s+(?:is|was|to))?\s*[:=]?\s*["'“‘]?([^\s"'”’]{8,})/giu;
const webAddress = /https?:\/\/\S+/giu;
const identifier = /\b[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}\b/giu;
const keyMaterial = /(?:0x)?\b(?=[0-9a-f]*\d)(?=[0-9a-f]*[a-f])[0-9a-f]{32,}\b|[A-Za-z0-9+/]{27,}={0,2}/gu;
const privateKey = /-----BEGIN [A-Z ]*PRIVATE KEY-----/u;

const kindsOf = (text: string): number =>
  [/[a-z]/, /[A-Z]/, /\d/, /[^A-Za-z0-9\s]/].filter((kind) => kind.test(text)).length;
/** The names under which keys are kept join words by these; they say nothing. */
const withoutJoints = (text: string): string => text.replace(/[-_.:/,;)]/g, '');
const looksDrawn = (text: string): boolean => kindsOf(withoutJoints(text)) >= 3;

/**
 * The part of a text that looks like a pre-shared key, a password or other key material: what follows such a word and mixes
 * letters, capitals and digits, or a long run as hexadecimal or base 64. Undefined where nothing does. Common practice, no
 * source: names of keys, identifiers and web addresses are no such thing.
 */
export const pastedSecret = (text: string): string | undefined => {
  const plain = text.replace(webAddress, ' ').replace(identifier, ' ');
  const pem = privateKey.exec(plain)?.[0];
  if (pem !== undefined) return pem;
  for (const [, value] of plain.matchAll(labelled)) if (looksDrawn(value!)) return value;
  for (const [value] of plain.matchAll(keyMaterial))
    if (/^(?:0x)?[0-9a-f]+$/u.test(value) || looksDrawn(value)) return value;
  return undefined;
};
