import type { Storm } from '../flood/storm.ts';
import type { DesignFacts } from '../network/network.ts';
import { countWord, listed } from './wording.ts';

/** 'Head office and Gullhaven', or 'nine sites' where a list would be too long for a row. */
export const sitesOf = (design: DesignFacts, storm: Storm): string =>
  storm.sites.length > 2
    ? `${countWord(storm.sites.length)} sites`
    : listed(storm.sites.map((id) => design.sites[id]!.name));

/** ' of segment A', ' of segments A and B'; nothing where no segment's frames get in. */
export const ofSegments = (design: DesignFacts, storm: Storm): string =>
  storm.segments.length === 0
    ? ''
    : ` of segment${storm.segments.length === 1 ? '' : 's'} ${listed(storm.segments.map((id) => design.segments[id]!.letter))}`;

export const stormSeen =
  'At the first broadcast after the last plug goes in, port counters of every device on the way jump to line rate, hosts of the whole segment lose each other, and switches report addresses that move from port to port. Pulling one of the connections ends it at once.';
export const stormWhy =
  'A frame at layer 2 has no time to live: what goes round goes round until somebody pulls a plug. One broadcast is enough to fill the tunnels and to busy every host of the segment at every site.';
