import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { segmentsByForwarder } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import {
  gatewayPlaces,
  segmentGatewayFacts,
  segmentGateways,
  type SegmentGateway,
} from './segment-gateways.ts';
import { namedOrCounted } from './wording.ts';

const udp = 17; // RFC 768
// RFC 2131 section 4.1: servers listen on 67, clients on 68.
const dhcpPorts: readonly number[] = [67, 68];

/** Whether some cross-connect of the segment keeps DHCP on its own side. */
const isFiltered = (network: Network, segment: Id): boolean =>
  [...segmentsByForwarder(network)].some(
    ([id, segments]) =>
      segments.includes(segment) &&
      Object.values(entryOf(network.design.forwarders, id).policy ?? {}).some(
        ({ action, protocol, ports }) =>
          action === 'deny' && protocol === udp && ports?.some((port) => dhcpPorts.includes(port)) === true,
      ),
  );

interface Answering {
  readonly segment: Id;
  readonly role: 'server' | 'relay';
  readonly gateways: readonly SegmentGateway[];
}

const answeringTwice = (network: Network): readonly Answering[] =>
  [...segmentGateways(network)].flatMap(([segment, all]) =>
    (['server', 'relay'] as const)
      .map((role): Answering => ({
        segment,
        role,
        gateways: all.filter(({ gateway }) => gateway.dhcp === role),
      }))
      .filter(({ gateways }) => gateways.length > 1 && !isFiltered(network, segment)),
  );

interface Values {
  readonly places: string;
  readonly segment: string;
  readonly verb: string;
}

export const dhcpAnsweredTwice = defineRule({
  id: 'dhcp-answered-twice',
  title: 'One gateway answers DHCP on a segment, or filters keep each at its own site',
  severity: 'degrading',
  looksAt: segmentGatewayFacts,
  why: 'Every server hears every client, and a client takes the offer it likes, usually the first. Where pools overlap two hosts get one address; where they don’t, hosts take the far site’s gateway.',
  seen: 'Some hosts of a site leave through the other one, and nobody can say which; now and then an address is in use twice.',
  sources: [
    { document: 'RFC 2131', clause: 'section 3.1' },
    { document: 'RFC 2131', clause: 'section 4.4.1' },
  ],
  messages: {
    servers: {
      words: 'two DHCP servers',
      sentence: (v: Values) => `${v.places} ${v.verb} serve DHCP on segment ${v.segment}`,
    },
    relays: {
      words: 'two DHCP relays',
      sentence: (v: Values) => `${v.places} ${v.verb} relay DHCP on segment ${v.segment}`,
      why: 'Each relay sends every client’s request on, and the server picks the pool by the relay that it came through: it sees two requests and may answer from two pools.',
      seen: 'The server’s log has each request twice; addresses may come from the pool of the other site.',
    },
  },
  check: (network) =>
    answeringTwice(network).map(({ segment, role, gateways }) => {
      const refs = gateways.map(({ forwarder }) => ({ collection: 'forwarders' as const, id: forwarder }));
      const values = {
        places: namedOrCounted(gatewayPlaces(network, gateways), 'gateways'),
        segment: entryOf(network.design.segments, segment).letter,
        verb: gateways.length === 2 ? 'both' : 'all',
      };
      const body = {
        values,
        elements: [...refs, { collection: 'segments' as const, id: segment }],
        identity: [segment, role],
        properties: refs.map((ref) => ({ ref, path: ['gateway', 'dhcp'] })),
        basis: gateways.map(({ forwarder }) => forwarder),
      };
      return role === 'server'
        ? { message: 'servers' as const, ...body }
        : {
            message: 'relays' as const,
            ...body,
            severity: 'advisory' as const,
            severityReason: 'Relays with one scope do no harm beyond a doubled request.',
            sources: [{ document: 'RFC 2131', clause: 'section 2' }, 'common practice, no source' as const],
          };
    }),
  fixes: (fault, network) => {
    const found = answeringTwice(network).find(
      ({ segment, role }) => fault.identity?.join(' ') === `${segment} ${role}`,
    );
    if (found === undefined) return [];
    const places = gatewayPlaces(network, found.gateways);
    return found.gateways.map((kept, i) => ({
      id: `keep-${kept.forwarder}`,
      label: `Only ${places[i]!} answers`,
      sentence: `Turns DHCP off at the other ${found.gateways.length === 2 ? 'gateway' : 'gateways'} of the segment; ${places[i]!} answers for all sites.`,
      patch: {
        forwarders: Object.fromEntries(
          found.gateways
            .filter((other) => other !== kept)
            .map(({ forwarder }) => [forwarder, { gateway: { dhcp: 'none' } }]),
        ),
      },
    }));
  },
});
