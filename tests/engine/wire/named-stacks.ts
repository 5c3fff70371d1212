import { bareStack, type EspTunnel, type Stack } from '#engine/wire/stack.ts';

const overIpv4: Stack = { ...bareStack, vxlanOver: 'ipv4' };
const overIpv6: Stack = { ...bareStack, vxlanOver: 'ipv6' };

const gcm: EspTunnel = {
  mode: 'tunnel',
  transform: 'aes-gcm-16',
  natTraversal: false,
  outerIp: 'ipv4',
};
const cbc = (integrity: EspTunnel['integrity']): EspTunnel => ({ ...gcm, transform: 'aes-cbc', integrity });
const throughNat = (esp: EspTunnel): Stack => ({ ...overIpv4, esp: { ...esp, natTraversal: true } });

const stacks: Readonly<Record<string, Stack>> = {
  bare: bareStack,
  'bare-tagged': { ...bareStack, outerTags: 1 },
  'vxlan-v4': overIpv4,
  'vxlan-v4-tagged': { ...overIpv4, innerTags: 1 },
  'vxlan-v6': overIpv6,
  'gcm-tunnel': { ...overIpv4, esp: gcm },
  'gcm-tunnel-nat': throughNat(gcm),
  'gcm-tunnel-tagged': { ...overIpv4, innerTags: 1, esp: gcm },
  'gcm-transport': { ...overIpv4, esp: { mode: 'transport', transform: 'aes-gcm-16', natTraversal: false } },
  'gcm-tunnel-v6-around-v4': { ...overIpv4, esp: { ...gcm, outerIp: 'ipv6' } },
  'gcm-tunnel-all-v6': { ...overIpv6, esp: { ...gcm, outerIp: 'ipv6' } },
  'cbc-sha1': { ...overIpv4, esp: cbc('hmac-sha1-96') },
  'cbc-sha1-nat': throughNat(cbc('hmac-sha1-96')),
  'cbc-sha256': { ...overIpv4, esp: cbc('hmac-sha2-256-128') },
  'cbc-sha256-tagged': { ...overIpv4, innerTags: 1, esp: cbc('hmac-sha2-256-128') },
  'cbc-sha256-nat': throughNat(cbc('hmac-sha2-256-128')),
  'cbc-sha512': { ...overIpv4, esp: cbc('hmac-sha2-512-256') },
  'cbc-sha512-nat': throughNat(cbc('hmac-sha2-512-256')),
};

/** The stack that a reference file means by a name. */
export function namedStack(name: string): Stack {
  const stack = stacks[name];
  if (stack === undefined) throw new Error(`no stack is named ${name}`);
  return stack;
}
