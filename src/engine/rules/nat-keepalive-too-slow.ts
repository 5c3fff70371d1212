import { associationPath, landingOf } from '../network/association-path.ts';
import { ends } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { associationPlaces } from './places.ts';

// RFC 4787 section 4.3: a mapping must not expire in less than two minutes without a packet; many forget sooner.
const promisedMappingSeconds = 120;
// RFC 3948 section 4: the interval to use where nothing else is set.
const usualKeepaliveSeconds = 20;

export const natKeepaliveTooSlow = defineRule({
  id: 'nat-keepalive-too-slow',
  title: 'An end behind NAT speaks up before the NAT forgets it',
  severity: 'degrading',
  looksAt: ['associations', 'landings', 'carriers', 'gateways', 'sites'],
  why: 'The NAT lets packets in only as long as it remembers that this end sent one. Once it has forgotten, the other end can’t reach it until it sends again.',
  seen: 'After quiet minutes the far site’s first packets are lost; a ping from the near site mends it at once.',
  sources: [
    { document: 'RFC 3948', clause: 'section 4' },
    { document: 'RFC 4787', clause: 'section 4.3' },
  ],
  messages: {
    slow: {
      words: 'keepalive too slow',
      sentence: (v: {
        readonly place: string;
        readonly keepaliveSeconds: number;
        readonly mappingSeconds: number;
      }) => `Keepalive every ${v.keepaliveSeconds} s at ${v.place}, NAT forgets after ${v.mappingSeconds} s`,
    },
  },
  check: (network) => {
    const { design } = network;
    return Object.entries(design.associations).flatMap(([id, association]) => {
      const path = associationPath(network, id);
      if (!path.ok) return [];
      const places = associationPlaces(design, association);
      return ends.flatMap((end) => {
        const landing = end === 'a' ? path.landingA : path.landingB;
        const { nat } = landingOf(network, landing);
        const keepaliveSeconds = association[end].natKeepaliveSeconds;
        if (nat === undefined || keepaliveSeconds === undefined) return [];
        const mappingSeconds = nat.mappingSeconds ?? promisedMappingSeconds;
        if (keepaliveSeconds < mappingSeconds) return [];
        const ref = { collection: 'associations', id } as const;
        return [
          {
            message: 'slow',
            values: { place: places[end], keepaliveSeconds, mappingSeconds },
            elements: [ref, { collection: 'links' as const, id: landing }],
            identity: [id, end],
            properties: [{ ref, path: [end, 'natKeepaliveSeconds'] }],
            basis: [keepaliveSeconds, mappingSeconds],
          },
        ];
      });
    });
  },
  fixes: ({ identity, values }) => {
    const [id, end] = identity as readonly [string, string];
    const seconds = Math.min(usualKeepaliveSeconds, Math.floor(values.mappingSeconds / 2));
    return seconds < 1
      ? []
      : [
          {
            id: 'faster',
            label: `Every ${seconds} s`,
            sentence: `Lets ${values.place} send a keepalive every ${seconds} s.`,
            patch: { associations: { [id]: { [end]: { natKeepaliveSeconds: seconds } } } },
          },
        ];
  },
});
