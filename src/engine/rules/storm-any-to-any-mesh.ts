import { isolationCure } from '../flood/isolation-cure.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { cutFix } from './storm-cuts.ts';
import { stormBody, stormOfFault, stormsOf } from './storm-faults.ts';
import { fateOf, ofSegments, sitesOf, stormSeen, stormWhy } from './storm-words.ts';
import { counted } from './wording.ts';

interface Values {
  readonly segments: string;
  readonly sites: string;
  readonly fate: string;
}

export const stormAnyToAnyMesh = defineRule({
  id: 'storm-any-to-any-mesh',
  title: 'Tunnels form no loop, or gateways don’t relay from one to another',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: stormWhy,
  seen: stormSeen,
  sources: [
    { document: 'RFC 4762', clause: 'section 4.4' },
    { document: 'RFC 4664', clause: 'section 3.4.1' },
  ],
  messages: {
    mesh: {
      words: 'broadcast storm',
      sentence: (v: Values) =>
        `Tunnels${v.segments} join ${v.sites} any to any and every gateway relays between them: ${v.fate}`,
    },
    ring: {
      words: 'broadcast storm',
      sentence: (v: Values) => `Tunnels${v.segments} form a ring through ${v.sites}: ${v.fate}`,
    },
  },
  check: (network) =>
    stormsOf(network, 'mesh').map((storm) => {
      const circuits = storm.tunnels.flatMap((id) => network.circuitsByTunnel.get(id) ?? []);
      const gateways = new Set(circuits.map(({ forwarder }) => forwarder)).size;
      const isFull = storm.tunnels.length === (gateways * (gateways - 1)) / 2;
      return {
        message: isFull ? ('mesh' as const) : ('ring' as const),
        values: {
          segments: ofSegments(network.design, storm),
          sites: sitesOf(network.design, storm),
          fate: fateOf(storm),
        },
        ...stormBody(storm),
        properties: circuits.map(({ forwarder, id }) => ({
          ref: { collection: 'forwarders' as const, id: forwarder },
          path: ['circuits', id, 'isolation'],
        })),
      };
    }),
  fixes: (fault, network) => {
    const storm = stormOfFault(network, 'mesh', fault);
    const cure = isolationCure(network, storm);
    const isolation: readonly Fix[] =
      cure === undefined
        ? []
        : [
            {
              id: 'isolate',
              label: 'Isolate the tunnels',
              sentence: `Puts the ${counted(storm.tunnels.length, 'tunnel', 'tunnels')} into isolation group ${cure.group} at every site: each site hears each other one directly, and no gateway passes a frame from one tunnel to another.`,
              patch: cure.patch,
            },
          ];
    return [...isolation, cutFix(network, storm)];
  },
});
