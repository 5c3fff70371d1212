const plain = (text: string): string =>
  text
    .normalize('NFKD')
    .replaceAll(/\p{M}+/gu, '')
    .toLowerCase()
    .replaceAll('ß', 'ss')
    .replaceAll(/[^a-z0-9 ]+/g, ' ')
    .trim();

/** A name as part of an id: a-z, 0-9 and dashes, at most `most` characters. */
export const slugOf = (name: string, most = 16): string =>
  plain(name).replaceAll(/ +/g, '-').slice(0, most).replace(/-+$/, '') || 'x';

/** Numbers in a name are kept whole; of words the first letters. */
const initials = (words: readonly string[]): string =>
  words.map((word) => (/^\d/.test(word) ? word : word.slice(0, 1))).join('');

/** Short forms of a name, the best first. */
const candidates = (name: string): readonly string[] => {
  const words = plain(name).split(/ +/).filter(Boolean);
  const [first = 'x'] = words;
  if (words.length < 2)
    return Array.from({ length: Math.max(1, Math.min(8, first.length) - 2) }, (_, i) =>
      first.slice(0, 3 + i),
    );
  return [initials(words), ...[2, 3, 4].map((n) => first.slice(0, n) + initials(words.slice(1)))].map(
    (code) => code.slice(0, 12),
  );
};

/**
 * Short forms of site names for the names of devices and tunnels: Gullhaven gul, Head office ho, Stage 12 s12. Each is its
 * own and none of those taken; `given` ones stay as they are.
 */
export const siteCodes = (
  sites: readonly { readonly name: string; readonly code?: string }[],
  taken: ReadonlySet<string> = new Set(),
): readonly string[] => {
  const used = new Set([...taken, ...sites.flatMap(({ code }) => code ?? [])]);
  return sites.map(({ name, code }) => {
    if (code !== undefined) return code;
    const forms = candidates(name);
    let free = forms.find((form) => !used.has(form));
    for (let n = 2; free === undefined; n += 1) {
      const numbered = `${forms[0]!.slice(0, 9)}${n}`;
      if (!used.has(numbered)) free = numbered;
    }
    used.add(free);
    return free;
  });
};
