import { isolationCure } from '../flood/isolation-cure.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { cutFix } from './storm-cuts.ts';
import { stormBody, stormOfFault, stormsOf } from './storm-faults.ts';
import { ofSegments, stormSeen, stormWhy } from './storm-words.ts';
import { counted, sentenceCase } from './wording.ts';

interface Values {
  readonly tunnels: string;
  readonly segments: string;
  readonly isOne: boolean;
}

const sentence = (v: Values): string =>
  `${v.tunnels}${v.segments} ${v.isOne ? 'closes' : 'close'} a loop that nothing blocks`;

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
      sentence,
      why: `Each site has a tunnel to each other one, and every gateway passes on what came through one tunnel into the others. ${stormWhy}`,
    },
    ring: { words: 'broadcast storm', sentence },
  },
  check: (network) =>
    stormsOf(network, 'mesh').map((storm) => {
      const circuits = storm.tunnels.flatMap((id) => network.circuitsByTunnel.get(id) ?? []);
      const gateways = new Set(circuits.map(({ forwarder }) => forwarder)).size;
      const isFull = storm.tunnels.length === (gateways * (gateways - 1)) / 2;
      return {
        message: isFull ? ('mesh' as const) : ('ring' as const),
        values: {
          tunnels: sentenceCase(counted(storm.tunnels.length, 'tunnel', 'tunnels')),
          segments: ofSegments(network.design, storm),
          isOne: storm.tunnels.length === 1,
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
