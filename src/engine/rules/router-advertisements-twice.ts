import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import {
  gatewayPlaces,
  segmentGatewayFacts,
  segmentGateways,
  type SegmentGateway,
} from './segment-gateways.ts';
import { namedOrCounted } from './wording.ts';

const advertisers = (network: Network): readonly (readonly [Id, readonly SegmentGateway[]])[] =>
  [...segmentGateways(network)]
    .map(
      ([segment, all]) =>
        [segment, all.filter(({ gateway }) => gateway.routerAdvertisements === true)] as const,
    )
    .filter(([, gateways]) => new Set(gateways.map(({ site }) => site)).size > 1);

export const routerAdvertisementsTwice = defineRule({
  id: 'router-advertisements-twice',
  title: 'Routers of one site alone advertise themselves on a segment',
  severity: 'degrading',
  looksAt: segmentGatewayFacts,
  why: 'Every host hears the advertisements of all sites, takes the prefixes of all and may leave through any of them; for a value such as the MTU the last one heard counts.',
  seen: 'IPv6 traffic of a site leaves through the other one and comes back; hosts have addresses of both prefixes.',
  sources: [
    { document: 'RFC 4861', clause: 'section 6.3.4' },
    { document: 'RFC 6104', clause: 'section 3' },
    { document: 'RFC 6105', clause: 'section 1' },
  ],
  messages: {
    several: {
      words: 'routers advertise twice',
      sentence: (v: { readonly places: string; readonly segment: string }) =>
        `${v.places} advertise routers on segment ${v.segment}`,
    },
  },
  check: (network) =>
    advertisers(network).map(([segment, gateways]) => {
      const refs = gateways.map(({ forwarder }) => ({ collection: 'forwarders' as const, id: forwarder }));
      return {
        message: 'several',
        values: {
          places: namedOrCounted(gatewayPlaces(network, gateways), 'gateways'),
          segment: entryOf(network.design.segments, segment).letter,
        },
        elements: [...refs, { collection: 'segments' as const, id: segment }],
        identity: [segment],
        properties: refs.map((ref) => ({ ref, path: ['gateway', 'routerAdvertisements'] })),
        basis: gateways.map(({ forwarder }) => forwarder),
      };
    }),
  fixes: (fault, network) => {
    const gateways = advertisers(network).find(([segment]) => segment === fault.identity?.[0])?.[1] ?? [];
    const sites = [...new Set(gateways.map(({ site }) => site))];
    return sites.map((kept) => {
      const place = entryOf(network.design.sites, kept).name;
      return {
        id: `keep-${kept}`,
        label: `Only ${place} advertises`,
        sentence: `Turns router advertisements off at the gateways of other sites than ${place}.`,
        patch: {
          forwarders: Object.fromEntries(
            gateways
              .filter(({ site }) => site !== kept)
              .map(({ forwarder }) => [forwarder, { gateway: { routerAdvertisements: false } }]),
          ),
        },
      };
    });
  },
});
