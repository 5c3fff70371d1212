import type { Entry } from '../model/design.ts';
import { patchAt } from '../model/merge-patch.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { tunnelPlaces } from './places.ts';
import { FIRST_PLAIN_VNI, freeVnis, isVniFreeAt, isVniInPool } from './vni-use.ts';

const differ = (tunnel: Entry<'tunnels'>): { readonly a: number; readonly b: number } | undefined =>
  tunnel.a.vni !== undefined && tunnel.b.vni !== undefined && tunnel.a.vni !== tunnel.b.vni
    ? { a: tunnel.a.vni, b: tunnel.b.vni }
    : undefined;

export const tunnelVniMismatch = defineRule({
  id: 'tunnel-vni-mismatch',
  title: 'Both ends of a tunnel have the same VNI',
  severity: 'blocking',
  looksAt: ['tunnels', 'endpoints', 'gateways', 'sites'],
  why: 'Each end knows only its own VNI and drops what the other sends. IPsec and the endpoints’ pings know nothing of VNIs and look healthy.',
  seen: 'The association is up and the endpoints answer pings, yet no host of one site learns an address of the other. VXLAN packets arrive at both ends; the counter for unknown VNIs rises.',
  sources: [
    { document: 'RFC 7348', clause: 'section 4.1' },
    { document: 'RFC 7348', clause: 'section 5' },
  ],
  messages: {
    differ: {
      words: 'VNIs differ',
      sentence: (v: {
        readonly vniA: number;
        readonly placeA: string;
        readonly vniB: number;
        readonly placeB: string;
      }) => `VNI ${v.vniA} at ${v.placeA}, ${v.vniB} at ${v.placeB}`,
    },
  },
  check: ({ design }) =>
    Object.entries(design.tunnels).flatMap(([id, tunnel]) => {
      const vnis = differ(tunnel);
      if (vnis === undefined) return [];
      const places = tunnelPlaces(design, tunnel);
      const ref = { collection: 'tunnels', id } as const;
      return [
        {
          message: 'differ' as const,
          values: { vniA: vnis.a, placeA: places.a, vniB: vnis.b, placeB: places.b },
          elements: [ref],
          properties: [
            { ref, path: ['a', 'vni'] },
            { ref, path: ['b', 'vni'] },
          ],
          basis: [vnis.a, vnis.b],
          mark: { kind: 'cut' as const, tunnel: id, vnis },
        },
      ];
    }),
  fixes: (fault, { design }, context) => {
    const id = fault.elements[0]!.id;
    const tunnel = design.tunnels[id]!;
    const { vniA, vniB, placeA, placeB } = fault.values;
    const set = (end: 'a' | 'b', vni: number, place: string, other: string): Fix => ({
      id: `set-${end}`,
      label: `Set ${place} to ${vni}`,
      sentence: `Sets the VNI of ${tunnel.name} at ${place} to ${vni}, as at ${other}.`,
      patch: patchAt(['tunnels', id, end, 'vni'], vni),
    });
    const isSound = (vni: number): boolean => vni >= FIRST_PLAIN_VNI && isVniInPool(context, vni);
    const candidates = [
      {
        fix: set('b', vniA, placeB, placeA),
        free: isVniFreeAt(design, tunnel.b.endpoint, vniA, id),
        sound: isSound(vniA),
      },
      {
        fix: set('a', vniB, placeA, placeB),
        free: isVniFreeAt(design, tunnel.a.endpoint, vniB, id),
        sound: isSound(vniB),
      },
    ].sort((x, y) => Number(y.free) - Number(x.free) || Number(y.sound) - Number(x.sound));
    const fixes = candidates.map(({ fix }) => fix);
    const [vni] = freeVnis(design, context, 1);
    if (vni === undefined || candidates.some(({ free, sound }) => free && sound)) return fixes;
    return [
      {
        id: 'set-both',
        label: `Set both ends to ${vni}`,
        sentence: `Sets the VNI of ${tunnel.name} to ${vni} at both ends, since ${vniA} and ${vniB} are taken, reserved or outside the pool.`,
        patch: { tunnels: { [id]: { a: { vni }, b: { vni } } } },
      },
      ...fixes,
    ];
  },
});
