import type { MergePatch } from '../model/merge-patch.ts';
import { defineRule } from './define-rule.ts';
import type { PermittedCrossConnect } from './permitted-cross-connects.ts';
import { permittedCrossConnectFacts, permittedCrossConnects } from './permitted-cross-connects.ts';
import { siteNameOf } from './places.ts';
import { directions, passesFamily, type Direction } from './protocol-frames.ts';

const families = [4, 6] as const;

/** Families whose packets the policy lets pass in one direction only, and in which. */
const oneWay = ({ forwarder: { policy } }: PermittedCrossConnect): readonly (readonly [4 | 6, Direction])[] =>
  families.flatMap((family) => {
    const open = directions.filter((direction) => passesFamily(policy, direction, family));
    return open.length === 1 ? [[family, open[0]!] as const] : [];
  });

export const policyOneDirection = defineRule({
  id: 'policy-one-direction',
  title: 'A cross-connect’s policy permits packets both ways',
  severity: 'degrading',
  looksAt: permittedCrossConnectFacts,
  why: 'Sessions that begin on the other side are dropped, and where the filter keeps no state so are all answers.',
  seen: 'Connections work when opened from one site and time out from the other, or never get an answer at all.',
  sources: ['common practice, no source'],
  messages: {
    oneWay: {
      words: 'one way only',
      sentence: (v: {
        readonly forwarder: string;
        readonly place: string;
        readonly packets: string;
        readonly way: string;
      }) => `${v.forwarder} at ${v.place} permits ${v.packets} only ${v.way} the tunnel`,
    },
  },
  check: (network) =>
    permittedCrossConnects(network).flatMap((each) => {
      const [first, second] = oneWay(each);
      if (first === undefined) return [];
      const ref = { collection: 'forwarders', id: each.id } as const;
      const isSame = second !== undefined && second[1] === first[1];
      return [
        {
          message: 'oneWay',
          values: {
            forwarder: each.forwarder.name,
            place: siteNameOf(network.design, each.forwarder.device),
            packets: isSame ? 'IP' : `IPv${first[0]}`,
            way: first[1] === 'to-tunnel' ? 'into' : 'out of',
          },
          elements: [ref],
          properties: [{ ref, path: ['policy'] }],
          basis: [first, second ?? []].map((pair) => [...pair]),
        },
      ];
    }),
  fixes: (fault, network) => {
    const { id } = fault.elements[0]!;
    const each = permittedCrossConnects(network).find((candidate) => candidate.id === id)!;
    const ways = oneWay(each).map(([, direction]) => direction);
    const opened = Object.entries(each.forwarder.policy ?? {}).filter(
      ([, { action, direction }]) => action === 'permit' && ways.includes(direction as Direction),
    );
    // Where a rule tells sources from destinations, the other way needs them the other way round: a rule of its own.
    if (opened.some(([, rule]) => rule.sources !== undefined || rule.destinations !== undefined)) return [];
    const policy: { [rule: string]: MergePatch } = Object.fromEntries(
      opened.map(([rule]) => [rule, { direction: 'both' }]),
    );
    return [
      {
        id: 'both',
        label: 'Permit both ways',
        sentence: `Lets every permitting rule of ${fault.values.forwarder} work both ways.`,
        patch: { forwarders: { [id]: { policy } } },
      },
    ];
  },
});
