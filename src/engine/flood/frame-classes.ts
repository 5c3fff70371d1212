import type { Entry } from '../model/design.ts';
import { inRankOrder } from '../model/rank.ts';
import { parsePrefix } from '../network/parse-prefix.ts';

/**
 * Frames that flood, told apart only as far as filters and multicast settings do: ARP requests, IPv4 broadcasts, IPv6
 * neighbour discovery (a multicast), and broadcasts of any other EtherType.
 */
export const frameClasses = ['arp', 'ipv4', 'ipv6', 'other'] as const;
export type FrameClass = (typeof frameClasses)[number];
/** A set of frame classes, one bit each. */
export type ClassSet = number;
export const allClasses: ClassSet = 0b1111;
export const classBit = (frame: FrameClass): ClassSet => 1 << frameClasses.indexOf(frame);
export const classesIn = (set: ClassSet): readonly FrameClass[] =>
  frameClasses.filter((frame) => (set & classBit(frame)) !== 0);

type Forwarder = Entry<'forwarders'>;
type Rule = NonNullable<Forwarder['policy']>[string];

// RFC 826: 0x0806; RFC 894: 0x0800; RFC 2464 section 3: 0x86dd.
const etherTypes: { readonly [frame in FrameClass]?: number } = { arp: 0x0806, ipv4: 0x0800, ipv6: 0x86dd };
const udp = 17; // RFC 768
const icmp6 = 58; // RFC 4443 section 1

const overlaps = (prefix: string, group: string): boolean => {
  const [mine, mineBits] = parsePrefix(prefix);
  const [other, otherBits] = parsePrefix(group);
  const bits = Math.min(mineBits, otherBits);
  return mine.kind() === other.kind() && mine.match([other, bits]);
};

/** Where flooded frames of a class are addressed. RFC 919 section 7: 255.255.255.255; RFC 4291 section 2.7: ff00::/8. */
const reaches = (destinations: Rule['destinations'], frame: FrameClass): boolean =>
  destinations === undefined ||
  frame === 'arp' ||
  destinations.some((prefix) => overlaps(prefix, frame === 'ipv4' ? '255.255.255.255/32' : 'ff00::/8'));

/** Whether a rule can be about some flooded frame of the class, whoever sent it. */
const concerns = (rule: Rule, frame: FrameClass): boolean => {
  const ofKind =
    rule.frames === 'any' ||
    rule.frames === frame ||
    (rule.frames === 'broadcast' && frame !== 'ipv6') ||
    (rule.frames === 'multicast' && frame === 'ipv6') ||
    (rule.frames === 'ethertype' &&
      (rule.ethertype === undefined ||
        rule.ethertype === etherTypes[frame] ||
        (frame === 'other' && !Object.values(etherTypes).includes(rule.ethertype))));
  if (!ofKind) return false;
  const isIp = frame === 'ipv4' || frame === 'ipv6';
  if (
    rule.protocol !== undefined &&
    rule.protocol !== (frame === 'ipv4' ? udp : frame === 'ipv6' ? icmp6 : -1)
  )
    return false;
  if (rule.ports !== undefined && frame !== 'ipv4') return false;
  if ((rule.destinations !== undefined || rule.sources !== undefined) && !isIp && frame !== 'arp')
    return false;
  return reaches(rule.destinations, frame);
};

/** True where a rule is about every frame of the class that it concerns at all. */
const isWhole = (rule: Rule): boolean =>
  rule.sources === undefined &&
  rule.destinations === undefined &&
  rule.protocol === undefined &&
  rule.ports === undefined &&
  (rule.frames !== 'ethertype' ||
    rule.ethertype === undefined ||
    Object.values(etherTypes).includes(rule.ethertype));

/**
 * The classes of which a forwarder lets at least some frames pass. A bridge passes all, but for multicast where it is told
 * to drop it; a cross-connect passes what its policy permits and drops the rest.
 */
export const classesPassed = (forwarder: Forwarder, direction: 'to-tunnel' | 'from-tunnel'): ClassSet => {
  const flooded = forwarder.multicast === 'drop' ? allClasses & ~classBit('ipv6') : allClasses;
  if (forwarder.kind === 'bridge') return flooded;
  const rules = inRankOrder(forwarder.policy)
    .map(([, rule]) => rule)
    .filter((rule) => rule.direction === 'both' || rule.direction === direction);
  let passed: ClassSet = 0;
  for (const frame of frameClasses) {
    // A narrow denial leaves other frames of the class to the rules after it.
    const decisive = rules.find(
      (rule) => concerns(rule, frame) && (rule.action === 'permit' || isWhole(rule)),
    );
    if (decisive?.action === 'permit') passed |= classBit(frame);
  }
  return passed & flooded;
};
