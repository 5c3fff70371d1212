import { segmentsByForwarder } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { firstPolicy } from './first-policy.ts';
import { siteNameOf } from './places.ts';

export const crossConnectWithoutPolicy = defineRule({
  id: 'cross-connect-without-policy',
  title: 'Every cross-connect has a filter policy that permits something',
  severity: 'blocking',
  looksAt: ['forwarders', 'gateways', 'sites', 'addressing'],
  why: 'A cross-connect drops what no rule permits. Without a permitting rule not even address resolution passes.',
  seen: 'The tunnel is up and nothing crosses it; the cross-connect’s drop counter rises with every ARP request.',
  sources: ['common practice, no source', { document: 'RFC 826' }],
  messages: {
    none: {
      words: 'no policy',
      sentence: (v: { readonly forwarder: string; readonly place: string }) =>
        `${v.forwarder} at ${v.place} has no policy: nothing passes`,
    },
    deniesAll: {
      words: 'nothing permitted',
      sentence: (v: { readonly forwarder: string; readonly place: string }) =>
        `The policy of ${v.forwarder} at ${v.place} permits nothing`,
    },
  },
  check: ({ design }) =>
    Object.entries(design.forwarders).flatMap(([id, { kind, name, device, policy }]) => {
      if (kind !== 'cross-connect') return [];
      const rules = Object.values(policy ?? {});
      if (rules.some(({ action }) => action === 'permit')) return [];
      const ref = { collection: 'forwarders', id } as const;
      return [
        {
          message: rules.length === 0 ? 'none' : 'deniesAll',
          values: { forwarder: name, place: siteNameOf(design, device) },
          elements: [ref],
          properties: [{ ref, path: ['policy'] }],
        },
      ];
    }),
  fixes: (fault, network) => {
    const id = fault.elements[0]!.id;
    return [
      {
        id: 'first-policy',
        label: 'Write a first policy',
        sentence: `Permits address resolution and IP between the segment’s subnets on ${fault.values.forwarder}, and denies and logs the rest; narrow it down from there.`,
        // An old policy that denies everything is replaced, entry by entry.
        patch: {
          forwarders: {
            [id]: {
              policy: {
                ...Object.fromEntries(
                  Object.keys(network.design.forwarders[id]!.policy ?? {}).map((old) => [old, null]),
                ),
                ...firstPolicy(network.design, segmentsByForwarder(network).get(id) ?? []),
              },
            },
          },
        },
      },
    ];
  },
});
