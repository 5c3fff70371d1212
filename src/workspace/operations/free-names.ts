import type { Design } from '../../engine/model/design.ts';
import { freeLetters } from '../../engine/numbering/free-letters.ts';
import { freeLoopbacks, freeVnis } from '../../engine/numbering/free-numbers.ts';

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

/** The lowest VLAN from 10 in tens that no segment uses at any site. */
export const freeVlan = (design: Design): number => {
  const taken = new Set(
    Object.values(design.segments).flatMap((segment) => Object.values(segment.sites).map((at) => at.vlan)),
  );
  return 10 * lowestFree((n) => taken.has(n * 10), 11);
};

/** The lowest VNI from 10001 that no end of a tunnel has, so that every tunnel gets a number of its own. */
export const freeVni = (design: Design): number => {
  const answer = freeVnis(design, 1);
  if (!answer.ok) throw new Error('the design holds every VNI there is');
  return answer.vnis[0]!;
};

/** The lowest loopback address from 10.255.0.1 that nobody has and that no segment's subnet holds. */
export const freeLoopback = (design: Design): string => {
  const answer = freeLoopbacks(design, 4, 1);
  // Where segments take all usual ranges in, the checks say that this endpoint lies in one.
  return answer.ok ? answer.loopbacks[0]! : '10.255.0.1/32';
};
