import fc from 'fast-check';
import { espIntegrityIds, espTransformIds, espTransforms } from '#engine/reference/esp.ts';
import type { IpVersion } from '#engine/reference/ip.ts';
import type { Esp, Stack } from '#engine/wire/stack.ts';

export const arbitraryIpVersion = fc.constantFrom<IpVersion>('ipv4', 'ipv6');

const arbitraryEsp: fc.Arbitrary<Esp> = fc
  .record({
    mode: fc.constantFrom('none' as const, 'tunnel' as const, 'transport' as const),
    transform: fc.constantFrom(...espTransformIds),
    integrity: fc.option(fc.constantFrom(...espIntegrityIds), { nil: undefined }),
    natTraversal: fc.boolean(),
    outerIp: arbitraryIpVersion,
  })
  .map(({ mode, transform, integrity, natTraversal, outerIp }): Esp => {
    if (mode === 'none') return { mode };
    const suite = { transform, natTraversal, ...(espTransforms[transform].aead ? {} : { integrity }) };
    return mode === 'tunnel' ? { mode, ...suite, outerIp } : { mode, ...suite };
  });

const arbitraryTags = fc.constantFrom(0 as const, 1 as const, 2 as const);

/** Any stack without a contradiction. */
export const arbitraryStack: fc.Arbitrary<Stack> = fc
  .record({
    innerTags: arbitraryTags,
    vxlanOver: fc.constantFrom<Stack['vxlanOver']>('none', 'ipv4', 'ipv6'),
    innerFrames: fc.constantFrom<Stack['innerFrames']>('padded', 'as-sent'),
    esp: arbitraryEsp,
    accessOverhead: fc.oneof(
      fc.constantFrom('none' as const, 'pppoe' as const),
      fc.integer({ min: 0, max: 256 }),
    ),
    accessPayloadBytes: fc.integer({ min: 576, max: 9216 }),
    outerTags: arbitraryTags,
  })
  .map((stack) => (stack.vxlanOver === 'none' ? { ...stack, innerTags: 0 } : stack));
