import type { PipShape } from '../../drawing/geometry.ts';
import type { DeepReadonly, Entry } from '../../engine/model/design.ts';
import type { Member, Port } from '../../engine/model/devices.ts';
import { isTrunk } from '../../engine/network/frame-tags.ts';
import { portKey, type Network } from '../../engine/network/network.ts';
import { allowedVlans } from './vlan-list.ts';

/** What a port is in few words: 'WAN', 'access 110', 'trunk 110, 120'. */
export const portWords = (port: DeepReadonly<Port>): string => {
  if (port.role === 'wan') return 'WAN';
  if (port.role === 'member-link') return 'member link';
  if (!isTrunk(port)) return port.vlan === undefined ? 'access' : `access ${port.vlan}`;
  return port.allowedVlans === undefined ? 'trunk' : `trunk ${allowedVlans.write(port.allowedVlans)}`;
};

/** The pip that the sheet draws for a port. */
export const pipOf = (port: DeepReadonly<Port>): PipShape =>
  port.role === 'wan' ? 'lozenge' : port.role === 'member-link' ? 'bar' : isTrunk(port) ? 'square' : 'round';

/** One socket of a port: that of a member on a pair, the only one elsewhere; and the link that is in it. */
export interface Socket {
  readonly member?: Member;
  readonly link?: string;
  /** The plug at the cable's other end. */
  readonly peer?: { readonly device: string; readonly port: string; readonly member?: Member };
}

/** What is plugged into a port, socket by socket; a socket that holds two cables is listed twice. */
export const socketsOf = (network: Network, device: string, port: string): readonly Socket[] => {
  const entry: Entry<'devices'> = network.design.devices[device]!;
  const key = portKey(device, port);
  const cables = network.cablesByPort.get(key) ?? [];
  const landings = network.landingsByPort.get(key) ?? [];
  const members: readonly (Member | undefined)[] =
    entry.kind === 'ha-pair' && entry.ports[port]?.role !== 'wan' ? [1, 2] : [undefined];
  return members.flatMap((member): readonly Socket[] => {
    const own = member === undefined ? {} : { member };
    const plugged: readonly Socket[] = [
      ...landings.map((link) => ({ ...own, link })),
      ...cables
        .filter((at) => member === undefined || at.member === member)
        .map((at) => {
          const cable = network.design.links[at.cable];
          const peer = cable?.kind === 'cable' ? cable[at.end === 'a' ? 'b' : 'a'] : undefined;
          return { ...own, link: at.cable, ...(peer === undefined ? {} : { peer }) };
        }),
    ];
    return plugged.length === 0 ? [own] : plugged;
  });
};
