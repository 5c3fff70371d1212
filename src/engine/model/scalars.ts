import ipaddr from 'ipaddr.js';
import { z } from 'zod';

/** Names an entry inside its collection; never reused for something else within one design. */
export const idSchema = z
  .string()
  .regex(
    /^[a-z0-9][a-z0-9._-]{0,63}$/,
    'expected 1 to 64 of a-z, 0-9, dot, dash or underscore, starting with a letter or digit',
  )
  // Own keys of these names confuse code that treats a record as a plain object.
  .refine((id) => id !== 'constructor' && id !== 'prototype', 'expected a name that is not reserved');
export type Id = string;

/** One line that a person reads on the sheet. */
export const nameSchema = z
  .string()
  .trim()
  .min(1, 'expected a name, at least one character')
  .max(80, 'expected at most 80 characters')
  // eslint-disable-next-line no-control-regex
  .regex(/^[^\u0000-\u001f\u007f]*$/, 'expected one line without control characters');

export const textSchema = z.string().max(4000, 'expected at most 4,000 characters');

/** Place among its siblings, compared as plain text; see rank.ts. */
export const rankSchema = z.string().regex(/^[0-9A-Za-z]{1,128}$/, 'expected a rank of letters and digits');

// IEEE 802.1Q-2022 table 9-2: 0 is the null VLAN ID, 4095 is reserved (read in ieee802-dot1q-types: range 1..4094).
export const vlanSchema = z
  .int('expected a whole number from 1 to 4094')
  .min(1, 'expected a VLAN from 1 to 4094; 0 means no VLAN')
  .max(4094, 'expected a VLAN from 1 to 4094; 4095 is reserved');

// RFC 7348 section 5: the VNI field has 24 bits.
export const vniSchema = z
  .int('expected a whole number from 0 to 16777215')
  .min(0, 'expected a VNI from 0 to 16777215')
  .max(16_777_215, 'expected a VNI from 0 to 16777215; the field has 24 bits');

// RFC 768: ports have 16 bits, 0 is no port.
export const udpPortSchema = z
  .int()
  .min(1, 'expected a UDP port from 1 to 65535')
  .max(65_535, 'expected a UDP port from 1 to 65535');

/** Largest IP packet in bytes, Ethernet header and tags excluded. RFC 791 section 3.1: every IPv4 link carries 68 bytes. */
export const mtuSchema = z
  .int()
  .min(68, 'expected an MTU of 68 to 65535 bytes')
  .max(65_535, 'expected an MTU of 68 to 65535 bytes');

export const rateBpsSchema = z
  .int()
  .min(1, 'expected a rate above 0 bit/s')
  .max(10_000_000_000_000, 'expected at most 10 Tbit/s');
export const durationUsSchema = z
  .int()
  .min(0, 'expected 0 microseconds or more')
  .max(60_000_000, 'expected at most 60 seconds');
export const secondsSchema = z
  .int()
  .min(1, 'expected 1 second or more')
  .max(31_536_000, 'expected at most one year');
export const countSchema = z
  .int()
  .min(0, 'expected 0 or more')
  .max(100_000_000, 'expected at most 100 million');

export const ipv4Schema = z
  .string()
  .refine((text) => ipaddr.IPv4.isValidFourPartDecimal(text), 'expected an IPv4 address such as 192.0.2.10');
export const ipv6Schema = z
  .string()
  .refine(
    (text) => ipaddr.IPv6.isValid(text) && !text.includes('%'),
    'expected an IPv6 address such as 2001:db8::10',
  );
export const ipSchema = z.union([ipv4Schema, ipv6Schema], 'expected an IPv4 or IPv6 address');

const isCidr = (text: string, kind: 'ipv4' | 'ipv6'): boolean => {
  const [address, prefix, rest] = text.split('/');
  if (address === undefined || prefix === undefined || rest !== undefined || !/^\d{1,3}$/.test(prefix))
    return false;
  const valid =
    kind === 'ipv4' ? ipv4Schema.safeParse(address).success : ipv6Schema.safeParse(address).success;
  return valid && Number(prefix) <= (kind === 'ipv4' ? 32 : 128);
};
export const cidr4Schema = z
  .string()
  .refine(
    (text) => isCidr(text, 'ipv4'),
    'expected an IPv4 address with prefix length such as 10.255.0.1/32',
  );
export const cidr6Schema = z
  .string()
  .refine(
    (text) => isCidr(text, 'ipv6'),
    'expected an IPv6 address with prefix length such as 2001:db8::1/128',
  );
export const cidrSchema = z
  .string()
  .refine(
    (text) => isCidr(text, 'ipv4') || isCidr(text, 'ipv6'),
    'expected a prefix such as 10.110.0.0/22 or 2001:db8:110::/64',
  );

/** A map whose entries keep a place by `rank`, so that two people may change different entries. */
export const rankedMap = <S extends z.ZodType>(entry: S) => z.record(idSchema, entry);
