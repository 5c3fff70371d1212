import { ETHERNET_HEADER_BYTES, FCS_BYTES } from '../reference/ethernet.ts';
import { mixLetterFrameBytes } from '../reference/frame-mixes.ts';
import { IP_HEADER_BYTES, LARGEST_IP_PACKET_BYTES, type IpVersion } from '../reference/ip.ts';
import { refuse, wholeNumberProblems, type Answer, type Problem } from './problem.ts';

/** How often IP packets of a length occur, relative to the other entries of the mix. */
export interface MixEntry {
  readonly ipBytes: number;
  readonly weight: number;
}

export type FrameMix = readonly MixEntry[];

export const MOST_MIX_ENTRIES = 64;
export const MOST_MIX_WEIGHT = 1_000_000;

/** What is wrong with a mix, in the order of its entries. */
export function mixProblems(field: string, mix: FrameMix, innerIpVersion: IpVersion): readonly Problem[] {
  if (mix.length === 0 || mix.length > MOST_MIX_ENTRIES) {
    return [{ field, value: mix.length, expected: `1 to ${MOST_MIX_ENTRIES} packet sizes` }];
  }
  return mix.flatMap((entry, index) => [
    ...wholeNumberProblems(
      `${field}.${index}.ipBytes`,
      entry.ipBytes,
      IP_HEADER_BYTES[innerIpVersion],
      LARGEST_IP_PACKET_BYTES[innerIpVersion],
    ),
    ...wholeNumberProblems(`${field}.${index}.weight`, entry.weight, 1, MOST_MIX_WEIGHT),
  ]);
}

const isMixLetter = (letter: string): letter is keyof typeof mixLetterFrameBytes =>
  Object.hasOwn(mixLetterFrameBytes, letter);

/**
 * The mix that a sequence of size letters stands for, such as 'aaaaaaaddddg', in order of size.
 * The letter z is a packet as long as the MTU given.
 */
// RFC 6985 section 3 and section 4.
export function frameMixFromLetters(letters: string, mtuBytes: number): Answer<{ mix: FrameMix }> {
  const problems = [
    ...wholeNumberProblems('mtuBytes', mtuBytes, IP_HEADER_BYTES.ipv4, LARGEST_IP_PACKET_BYTES.ipv4),
  ];
  const weights = new Map<number, number>();
  for (const letter of letters) {
    if (letter !== 'z' && !isMixLetter(letter)) {
      problems.push({ field: 'letters', value: letter, expected: 'letters from a to j, or z for the MTU' });
      continue;
    }
    const ipBytes =
      letter === 'z' ? mtuBytes : mixLetterFrameBytes[letter] - ETHERNET_HEADER_BYTES - FCS_BYTES;
    weights.set(ipBytes, (weights.get(ipBytes) ?? 0) + 1);
  }
  if (letters.length === 0) {
    problems.push({ field: 'letters', value: letters, expected: 'at least one letter' });
  }
  if (problems.length > 0) return refuse(problems);
  const mix = [...weights].map(([ipBytes, weight]) => ({ ipBytes, weight }));
  return { ok: true, mix: mix.sort((one, other) => one.ipBytes - other.ipBytes) };
}
