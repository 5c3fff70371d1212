import { defineRule } from './define-rule.ts';
import { FIRST_PLAIN_VNI, freeVnis } from './vni-use.ts';

export const tunnelVniReserved = defineRule({
  id: 'tunnel-vni-reserved',
  title: 'VNIs start at 2',
  severity: 'advisory',
  looksAt: ['tunnels'],
  why: 'What VNI 0 means depends on the implementation, and VNI 1 may be taken as the management VNI, whose frames are never handed to a segment.',
  seen: 'The tunnel works with one make of equipment and silently drops everything, or refuses the setting, with another.',
  sources: [
    { document: 'RFC 8944', clause: 'section 4' },
    { document: 'RFC 8971', clause: 'section 4' },
  ],
  messages: {
    zero: {
      words: 'VNI 0 used',
      sentence: (v: { readonly tunnel: string }) =>
        `${v.tunnel} uses VNI 0, whose meaning depends on the equipment`,
    },
    one: {
      words: 'VNI 1 used',
      sentence: (v: { readonly tunnel: string }) =>
        `${v.tunnel} uses VNI 1, which may be kept for management`,
    },
  },
  check: ({ design }) =>
    Object.entries(design.tunnels).flatMap(([id, { name, a, b }]) => {
      // Two differing VNIs are a fault of their own, and curing that one settles the number.
      if (a.vni !== undefined && b.vni !== undefined && a.vni !== b.vni) return [];
      const vni = a.vni ?? b.vni;
      if (vni === undefined || vni >= FIRST_PLAIN_VNI) return [];
      const ref = { collection: 'tunnels', id } as const;
      return [
        {
          message: vni === 0 ? 'zero' : 'one',
          values: { tunnel: name },
          elements: [ref],
          properties: (['a', 'b'] as const)
            .filter((end) => ({ a, b })[end].vni !== undefined)
            .map((end) => ({ ref, path: [end, 'vni'] })),
          basis: [vni],
        },
      ];
    }),
  fixes: (fault, { design }, context) => {
    const id = fault.elements[0]!.id;
    return freeVnis(design, context, 1).map((vni) => ({
      id: 'renumber',
      label: `Set both ends to ${vni}`,
      sentence: `Sets the VNI of ${fault.values.tunnel} to ${vni}, which is free, at both ends.`,
      patch: { tunnels: { [id]: { a: { vni }, b: { vni } } } },
    }));
  },
});
