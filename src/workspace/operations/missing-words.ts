import type { Design } from '../../engine/model/design.ts';
import type { Missing } from '../../engine/wire/tunnel-stack.ts';
import { nameOf } from './name-of.ts';

const words: Readonly<Record<string, string>> = {
  speedBps: 'speed',
  rateBps: 'ordered rate',
  profile: 'equipment profile',
  packetsPerSecond: 'packets per second',
  manyFlowsBps: 'rate of many flows',
  oneFlowBps: 'rate of one flow',
  forwardBps: 'rate there',
  reverseBps: 'rate back',
  mix: 'frame mix',
  latencyUs: 'latency',
  lossPpm: 'loss',
  mtu: 'MTU',
  ipv4: 'IPv4 address',
  ipv6: 'IPv6 address',
  espProposals: 'IPsec proposals',
  liveness: 'liveness check',
  failoverUs: 'failover time',
  stateSync: 'state synchronisation',
};

/** What nobody has filled in: 'speed of fw-ho wan1', 'packets per second, encrypted, of Branch gateway'. */
export const missingWords = (design: Design, { ref, path }: Missing): string => {
  const [first, second, third] = path;
  if (first === 'ports' && second !== undefined)
    return `${words[third ?? ''] ?? third ?? 'facts'} of ${nameOf(design, { ...ref, port: second })}`;
  const property = words[path.at(-1) ?? ''] ?? path.join(' ');
  const cipher = ref.collection === 'profiles' && first !== undefined ? `, ${first},` : '';
  return `${property}${cipher} of ${nameOf(design, ref)}`;
};
