import type { Design } from '../../engine/model/design.ts';
import { freeLetters } from '../../engine/numbering/free-letters.ts';
import { freeLoopbacks, freeVlans, freeVnis } from '../../engine/numbering/free-numbers.ts';
import type { NumberingContext } from '../../engine/numbering/numbering-context.ts';

const lowestFree = (taken: (n: number) => boolean, from: number): number => {
  let n = from;
  while (taken(n)) n += 1;
  return n;
};

/** The first of `base`, `base-2` (or `base-1`, `base-2` when `numbered`) that nothing in the collection is called. */
export const freeName = (
  entries: { readonly [id: string]: { readonly name?: string } },
  base: string,
  numbered = true,
): string => {
  const names = new Set(Object.values(entries).map((entry) => entry.name));
  if (!numbered && !names.has(base)) return base;
  const join = /\d$/.test(base) ? '-' : base.includes(' ') || /^[A-Z]/.test(base) ? ' ' : '-';
  return `${base}${join}${lowestFree((n) => names.has(`${base}${join}${n}`), numbered ? 1 : 2)}`;
};

/** A, B … Z, then AA, AB …, the first that no segment has. */
export const freeLetter = (design: Design): string => freeLetters(design, 1)[0]!;

/** The context first, then without its pools: where these are used up, the checks say that the number lies in none. */
const triedOn = (context: NumberingContext): readonly NumberingContext[] => [
  context,
  { ...context, pools: undefined },
];

/** The lowest VLAN in tens, else the lowest, that is in the pools and that no site of the design uses. */
export const freeVlan = (design: Design, context: NumberingContext): number => {
  for (const at of triedOn(context))
    for (const step of [10, 1]) {
      const answer = freeVlans(design, 1, { step }, at);
      if (answer.ok) return answer.vlans[0]!;
    }
  // A network of 4,094 VLANs in use: the checks show the one that clashes.
  return 110;
};

/** The lowest VNI that no end of a tunnel has, here or in another design, so that every tunnel gets a number of its own. */
export const freeVni = (design: Design, context: NumberingContext): number => {
  for (const at of triedOn(context)) {
    const answer = freeVnis(design, 1, at);
    if (answer.ok) return answer.vnis[0]!;
  }
  throw new Error('the workspace holds every VNI there is');
};

/** The lowest loopback address that nobody has, here or in another design, and that no segment's subnet holds. */
export const freeLoopback = (design: Design, context: NumberingContext): string => {
  for (const at of triedOn(context)) {
    const answer = freeLoopbacks(design, 4, 1, at);
    if (answer.ok) return answer.loopbacks[0]!;
  }
  // Where segments take all usual ranges in, the checks say that this endpoint lies in one.
  return '10.255.0.1/32';
};
