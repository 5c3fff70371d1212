import type { Fix } from './finding.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { tunnelPlaces } from './places.ts';
import { freeVnis } from './vni-use.ts';

const messages = {
  atBoth: {
    words: 'VNI missing',
    sentence: (v: { readonly tunnel: string }) => `${v.tunnel} has no VNI yet`,
  },
  atOne: {
    words: 'VNI missing',
    sentence: (v: {
      readonly tunnel: string;
      readonly vni: number;
      readonly place: string;
      readonly other: string;
    }) => `VNI ${v.vni} at ${v.other}, none yet at ${v.place}`,
  },
};

export const tunnelVniUnset = defineRule({
  id: 'tunnel-vni-unset',
  title: 'Every tunnel has a VNI at both ends',
  severity: 'advisory',
  looksAt: ['tunnels', 'endpoints', 'gateways', 'sites'],
  why: 'Whoever builds the tunnel will have to choose a number on the spot, and the checks of VNIs say nothing of this tunnel until then.',
  seen: 'The build sheet has an empty cell; two people at two sites fill it in differently.',
  sources: [{ document: 'RFC 7348', clause: 'section 5' }],
  messages,
  check: ({ design }) =>
    Object.entries(design.tunnels).flatMap(([id, tunnel]): readonly Fault<typeof messages>[] => {
      const missing = (['a', 'b'] as const).filter((end) => tunnel[end].vni === undefined);
      if (missing.length === 0) return [];
      const ref = { collection: 'tunnels', id } as const;
      const body = {
        elements: [ref],
        properties: missing.map((end) => ({ ref, path: [end, 'vni'] })),
      };
      const vni = tunnel.a.vni ?? tunnel.b.vni;
      if (vni === undefined) return [{ message: 'atBoth', values: { tunnel: tunnel.name }, ...body }];
      const places = tunnelPlaces(design, tunnel);
      const [place, other] = missing[0] === 'a' ? [places.a, places.b] : [places.b, places.a];
      return [
        { message: 'atOne', values: { tunnel: tunnel.name, vni, place, other }, ...body, basis: [vni] },
      ];
    }),
  fixes: (fault, { design }, context) => {
    const id = fault.elements[0]!.id;
    const set = (vni: number, reason: string): Fix => ({
      id: `set-${reason === 'free' ? 'free' : 'same'}`,
      label: `Set both ends to ${vni}`,
      sentence:
        reason === 'free'
          ? `Gives ${fault.values.tunnel} VNI ${vni}, the next free one, at both ends.`
          : `Gives ${fault.values.tunnel} VNI ${vni} at both ends, as it has at one.`,
      patch: { tunnels: { [id]: { a: { vni }, b: { vni } } } },
    });
    return fault.message === 'atOne'
      ? [set(fault.values.vni, 'same')]
      : freeVnis(design, context, 1).map((vni) => set(vni, 'free'));
  },
});
