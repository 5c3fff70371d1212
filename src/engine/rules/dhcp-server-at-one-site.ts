import { entryOf } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { segmentGatewayFacts, segmentGateways } from './segment-gateways.ts';

export const dhcpServerAtOneSite = defineRule({
  id: 'dhcp-server-at-one-site',
  title: 'Leases outlast a cut of the tunnels to the DHCP server',
  severity: 'degrading',
  looksAt: [...segmentGatewayFacts, 'segments'],
  why: 'While the tunnels are down nobody at the other sites gets or renews an address. Leases longer than the longest outage you expect are enough, or a server at each site with its own part of the range and a filter between.',
  seen: 'During a long outage hosts of the other sites lose their addresses one by one, and those that start up get none.',
  sources: ['common practice, no source'],
  messages: {
    alone: {
      words: 'one DHCP server',
      sentence: (v: { readonly segment: string; readonly place: string }) =>
        `DHCP of segment ${v.segment} is served at ${v.place} alone`,
    },
  },
  check: (network) => {
    const { design } = network;
    return [...segmentGateways(network)].flatMap(([id, gateways]) => {
      const segment = entryOf(design.segments, id);
      const answering = gateways.filter(
        ({ gateway }) => gateway.dhcp === 'server' || gateway.dhcp === 'relay',
      );
      const [only] = answering;
      if (
        only?.gateway.dhcp !== 'server' ||
        answering.length > 1 ||
        segment.protocols?.includes('dhcp') !== true ||
        Object.keys(segment.sites).length < 2
      )
        return [];
      const ref = { collection: 'forwarders' as const, id: only.forwarder };
      return [
        {
          message: 'alone',
          values: { segment: segment.letter, place: entryOf(design.sites, only.site).name },
          elements: [ref, { collection: 'segments' as const, id }],
          identity: [id],
          properties: [{ ref, path: ['gateway', 'dhcp'] }],
          basis: [only.forwarder],
        },
      ];
    });
  },
});
