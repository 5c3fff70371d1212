import type { MergePatch } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import { isTrunk } from '../network/frame-tags.ts';
import type { Network } from '../network/network.ts';
import { entryOf, forwardingMembers } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import type { Uplink } from './pair-uplinks.ts';
import { freePorts, membersReached, switchGroupOf, uplinksOf } from './pair-uplinks.ts';
import { portLabel } from './port-label.ts';

/** True when the host reaches the pair's other member some other way: by a second cable, or through switches. */
const hasOtherWay = (network: Network, { device, pair, member }: Uplink): boolean => {
  const other = member === 1 ? 2 : 1;
  const direct = uplinksOf(network).some(
    (uplink) => uplink.device === device && uplink.pair === pair && uplink.member === other,
  );
  if (direct) return true;
  return (network.cablesByDevice.get(device) ?? []).some(({ cable }) => {
    const bundle = network.bundleByCable.get(cable);
    if (bundle === undefined || bundle.alive.length === 0) return false;
    const far = bundle.a.device === device ? bundle.b.device : bundle.a.device;
    const group = switchGroupOf(network, far);
    return group !== undefined && membersReached(network, group, pair).has(other);
  });
};

interface Refuge {
  readonly device: Id;
  readonly port: Id;
  readonly setUp: MergePatch;
}

/** A free port of a switch that reaches both members: one set up for the host's VLAN already, or else one to set up. */
const refugeOf = (network: Network, { device, port, pair }: Uplink): Refuge | undefined => {
  const { devices, segments } = network.design;
  const host = entryOf(devices, device);
  if (host.kind !== 'host' || isTrunk(host.ports[port]!)) return undefined;
  const vlan =
    host.segment === undefined ? undefined : entryOf(segments, host.segment).sites[host.site]?.vlan;
  if (vlan === undefined) return undefined;
  const candidates = (network.devicesBySite.get(host.site) ?? []).flatMap((id) => {
    const group = switchGroupOf(network, id);
    if (group === undefined || membersReached(network, group, pair).size < 2) return [];
    return freePorts(network, id).map(([free, entry]) => {
      const isReady = !isTrunk(entry) && entry.vlan === vlan;
      const { nativeVlan, allowedVlans } = entry;
      const setUp: MergePatch = isReady
        ? {}
        : {
            mode: 'access',
            vlan,
            ...(nativeVlan === undefined ? {} : { nativeVlan: null }),
            ...(allowedVlans === undefined ? {} : { allowedVlans: null }),
          };
      return { refuge: { device: id, port: free, setUp }, isReady, isTrunk: isTrunk(entry) };
    });
  });
  return candidates.sort(
    (a, b) => Number(b.isReady) - Number(a.isReady) || Number(a.isTrunk) - Number(b.isTrunk),
  )[0]?.refuge;
};

const lonelyHosts = (network: Network): readonly Uplink[] =>
  uplinksOf(network).filter(
    (uplink) =>
      entryOf(network.design.devices, uplink.device).kind === 'host' && !hasOtherWay(network, uplink),
  );

interface Values {
  readonly host: string;
  readonly member: string;
  readonly other: string;
}

export const hostSingleHomed = defineRule({
  id: 'host-single-homed',
  title: 'A host reaches both members of an HA pair',
  severity: 'blocking',
  looksAt: ['links', 'devices', 'forwarders', 'segments'],
  why: 'Only the active member forwards. A host that is wired to the other one is cut off, although every device is up.',
  seen: 'All is well until the pair fails over. Then this host alone is silent, its link light on, and comes back when the pair fails back.',
  sources: ['common practice, no source'],
  messages: {
    atRisk: {
      words: 'one member only',
      sentence: (v: Values) => `${v.host} is wired to ${v.member} alone, not to ${v.other}`,
    },
    cutOff: {
      words: 'wired to standby',
      sentence: (v: Values) => `${v.host} is wired to ${v.member} alone, which stands by`,
      seen: 'The link light is on and nobody answers until the pair fails over.',
    },
  },
  check: (network) =>
    lonelyHosts(network).map((uplink) => {
      const { devices } = network.design;
      const pair = entryOf(devices, uplink.pair);
      const names = pair.kind === 'ha-pair' ? pair.memberNames : { 1: pair.name, 2: pair.name };
      const forwards = forwardingMembers(pair).includes(uplink.member);
      const refuge = refugeOf(network, uplink);
      const cable = { collection: 'links', id: uplink.cable } as const;
      return {
        message: forwards ? ('atRisk' as const) : ('cutOff' as const),
        values: {
          host: entryOf(devices, uplink.device).name,
          member: names[uplink.member],
          other: names[uplink.member === 1 ? 2 : 1],
        },
        elements: [
          cable,
          { collection: 'devices' as const, id: uplink.device },
          { collection: 'devices' as const, id: uplink.pair },
        ],
        identity: [uplink.device, uplink.pair],
        properties: [{ ref: cable, path: [uplink.end === 'a' ? 'b' : 'a'] }],
        basis: [uplink.member, forwards],
        ...(forwards
          ? { severityReason: 'Nothing is wrong until the pair fails over; then this host is cut off.' }
          : {}),
        ...(refuge === undefined
          ? {}
          : {
              mark: {
                kind: 'ghost' as const,
                from: { device: uplink.device, port: uplink.port },
                to: { device: refuge.device, port: refuge.port },
                label: portLabel(network.design, refuge.device, refuge.port),
              },
            }),
      };
    }),
  fixes: (fault, network) => {
    const [cable] = fault.elements;
    const uplink = lonelyHosts(network).find((candidate) => candidate.cable === cable!.id);
    const refuge = uplink === undefined ? undefined : refugeOf(network, uplink);
    if (uplink === undefined || refuge === undefined) return [];
    const { design } = network;
    const target = portLabel(design, refuge.device, refuge.port);
    const end = uplink.end === 'a' ? 'b' : 'a';
    const isSetUp = Object.keys(refuge.setUp).length > 0;
    const link = entryOf(design.links, uplink.cable);
    const hadMember = link.kind === 'cable' && link[end].member !== undefined;
    return [
      {
        id: 'move-to-switch',
        label: `Move it to ${entryOf(design.devices, refuge.device).name}`,
        sentence: `Moves the cable of ${fault.values.host} to ${target}, which reaches both members${isSetUp ? ', and sets that port up for its segment' : ''}.`,
        patch: {
          links: {
            [uplink.cable]: {
              [end]: { device: refuge.device, port: refuge.port, ...(hadMember ? { member: null } : {}) },
            },
          },
          ...(isSetUp ? { devices: { [refuge.device]: { ports: { [refuge.port]: refuge.setUp } } } } : {}),
        },
      },
    ];
  },
});
