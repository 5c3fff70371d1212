import { wireFields, type WireTexts } from './wire-fields.ts';

const stackFields = [
  'tags',
  'vxlan',
  'esp',
  'transform',
  'integrity',
  'nat',
  'outer',
  'access',
  'payload',
  'mtu',
] as const;
export type StackTexts = Pick<WireTexts, (typeof stackFields)[number]>;

export interface StackPreset {
  readonly id: string;
  readonly label: string;
  /** Differs from the initial stack in these. */
  readonly changes: Partial<StackTexts>;
}

/** Stacks that are met often, to start from. The first is the initial one. */
export const stackPresets: readonly StackPreset[] = [
  { id: 'internet', label: 'VXLAN in IPsec over the internet', changes: {} },
  { id: 'internet-nat', label: 'VXLAN in IPsec through NAT', changes: { nat: 'yes' } },
  { id: 'internet-pppoe', label: 'VXLAN in IPsec over PPPoE', changes: { access: 'pppoe' } },
  { id: 'trunk', label: 'Trunk: VXLAN with one tag kept, in IPsec', changes: { tags: '1' } },
  { id: 'transport-mode', label: 'VXLAN in ESP transport mode', changes: { esp: 'transport' } },
  {
    id: 'cbc',
    label: 'VXLAN in IPsec with AES-CBC and HMAC-SHA2',
    changes: { transform: 'aes-cbc', integrity: 'hmac-sha2-256-128' },
  },
  {
    id: 'all-ipv6',
    label: 'VXLAN in IPsec, all outer headers IPv6',
    changes: { vxlan: 'ipv6', outer: 'ipv6' },
  },
  { id: 'fibre', label: 'VXLAN alone over a fibre of one’s own', changes: { esp: 'none' } },
  { id: 'jumbo', label: 'VXLAN in IPsec over a transport with MTU 9000', changes: { mtu: '9000' } },
];

/** Every field of the stack as the preset has it. */
export const textsOfPreset = (preset: StackPreset): StackTexts => ({
  ...(Object.fromEntries(stackFields.map((name) => [name, wireFields[name].initial])) as StackTexts),
  ...preset.changes,
});

/** The preset that these texts are, if they are one. */
export const presetOf = (texts: WireTexts): StackPreset | undefined =>
  stackPresets.find((preset) => {
    const stack = textsOfPreset(preset);
    return stackFields.every((name) => stack[name] === texts[name]);
  });
