/** Frame sizes of the mix notation by letter, FCS included; the letter z is the MTU of the path and has no size here. */
// RFC 6985 section 4.
export const mixLetterFrameBytes = {
  a: 64,
  b: 128,
  c: 256,
  d: 512,
  e: 1024,
  f: 1280,
  g: 1518,
  h: 2112,
  i: 9000,
  j: 16_000,
} as const satisfies Record<string, number>;

/** The 'simple IMIX' of seven small, four middling and one full packet, as IP packet sizes. */
// Common practice, no source: RFC 6985 deliberately standardises no mix.
export const simpleImix = [
  { ipBytes: 40, weight: 7 },
  { ipBytes: 576, weight: 4 },
  { ipBytes: 1500, weight: 1 },
] as const;
