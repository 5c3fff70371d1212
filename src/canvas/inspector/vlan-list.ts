import { reading, unreadable, type Reading, type Writing } from '../../lib/written-value.ts';

/** VLANs in order, neighbours of three and more as a range: '110, 120-125'. */
export const formatVlans = (vlans: readonly number[]): string => {
  const sorted = [...new Set(vlans)].sort((a, b) => a - b);
  const runs: [number, number][] = [];
  for (const vlan of sorted) {
    const last = runs.at(-1);
    if (last !== undefined && last[1] === vlan - 1) last[1] = vlan;
    else runs.push([vlan, vlan]);
  }
  return runs
    .map(([from, to]) => (from === to ? `${from}` : to === from + 1 ? `${from}, ${to}` : `${from}-${to}`))
    .join(', ');
};

const wayOut = 'type VLANs from 1 to 4094, such as 110, 120-125';

/** Reads '110, 120-125' as VLANs in order, each once. */
export const parseVlans = (text: string): Reading<readonly number[]> => {
  const vlans = new Set<number>();
  for (const part of text.split(/[,;]|\s+(?![-–\s])(?<![-–]\s*)/).map((piece) => piece.trim())) {
    if (part === '') continue;
    const match = /^(\d{1,5})(?:\s*[-–]\s*(\d{1,5}))?$/.exec(part);
    if (match === null) return unreadable(wayOut);
    const from = Number(match[1]);
    const to = Number(match[2] ?? match[1]);
    if (from < 1 || to > 4094) return unreadable(`${part} is not a VLAN: ${wayOut}`);
    if (to < from) return unreadable(`${part} runs backwards: type ${to}-${from}`);
    for (let vlan = from; vlan <= to; vlan += 1) vlans.add(vlan);
  }
  return vlans.size === 0 ? unreadable(wayOut) : reading([...vlans].sort((a, b) => a - b));
};

const orWord = <Word extends string>(words: readonly Word[]): Writing<Word | readonly number[]> => ({
  write: (value) => (typeof value === 'string' ? value : formatVlans(value)),
  read: (text) => {
    const word = words.find((candidate) => candidate === text.trim().toLowerCase());
    if (word !== undefined) return reading(word);
    const vlans = parseVlans(text);
    return vlans.ok ? vlans : unreadable(`${vlans.wayOut}, or ${words.join(' or ')}`);
  },
});

/** What a trunk lets through. */
export const allowedVlans = orWord(['all'] as const);
/** What a circuit takes from a port. */
export const circuitVlans = orWord(['untagged', 'all'] as const);

/** Pairs of a VLAN on the wire and the one inside: '110 > 210, 120 > 220'. */
export const vlanTranslation: Writing<{ readonly [vlan: string]: number }> = {
  write: (pairs) =>
    Object.entries(pairs)
      .sort(([a], [b]) => Number(a) - Number(b))
      .map(([outside, inside]) => `${outside} > ${inside}`)
      .join(', '),
  read: (text) => {
    const pairs: [string, number][] = [];
    for (const part of text.split(/[,;]/).map((piece) => piece.trim())) {
      if (part === '') continue;
      const match = /^(\d{1,5})\s*(?:>|→)\s*(\d{1,5})$/.exec(part);
      const [outside, inside] = [Number(match?.[1]), Number(match?.[2])];
      if (match === null || [outside, inside].some((vlan) => vlan < 1 || vlan > 4094))
        return unreadable('type pairs of VLANs from 1 to 4094, wire > inside, such as 110 > 210');
      pairs.push([String(outside), inside]);
    }
    return reading(Object.fromEntries(pairs));
  },
};
