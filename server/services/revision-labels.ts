const letters = 'ABCDEFGHIJKLMNOPQRSTUVWXYZ';
// Common practice, no source: the two are taken for the figures 1 and 0.
const unusedLetters = /[IO]/;

/** The number of a label in the order A, B … Z, AA, AB …, or of a figure; null for other words. */
function placeOf(label: string): number | null {
  if (/^\d{1,6}$/.test(label)) return Number(label);
  if (!/^[A-Z]{1,2}$/.test(label)) return null;
  return [...label].reduce((place, letter) => place * letters.length + letters.indexOf(letter) + 1, 0);
}

function lettersAt(place: number): string {
  const rest = place - 1;
  const last = letters[rest % letters.length]!;
  return rest < letters.length ? last : lettersAt(Math.floor(rest / letters.length)) + last;
}

function following(label: string): string {
  const place = placeOf(label)!;
  if (/^\d/.test(label)) return String(place + 1);
  let next = place + 1;
  while (unusedLetters.test(lettersAt(next))) next += 1;
  return lettersAt(next);
}

/**
 * What the next revision is called: what the title block says, if that comes after all that were used, else what follows on
 * the last. A team that counts in figures goes on in figures; without either the first is A.
 */
export function nextLabel(used: readonly string[], written: string | undefined): string {
  const [last] = used;
  const own = written?.trim().toUpperCase() ?? '';
  const place = placeOf(own);
  if (last === undefined) return place === null ? 'A' : own;
  const isOfOneKind = /^\d/.test(own) === /^\d/.test(last);
  return place !== null && isOfOneKind && place > placeOf(last)! ? own : following(last);
}
