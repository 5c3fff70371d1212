import ipaddr from 'ipaddr.js';
import type { Design } from '../../engine/model/design.ts';
import type { IpVersion } from '../../engine/reference/ip.ts';
import type { ProbeInput } from '../../engine/trace/probe.ts';
import { needsHost, probeOfPreset, versionsOf } from '../../engine/trace/probe-of-preset.ts';
import { probePresets } from '../../engine/trace/probe-presets.ts';

/** Something that can be sent: one of the engine's presets, or a datagram to a group of one's own. */
export interface Send {
  readonly id: string;
  readonly name: string;
  /** What one learns from it. */
  readonly shows: string;
  readonly to: 'host' | 'group' | 'prescribed';
  /** None for frames without IP. */
  readonly versions: readonly IpVersion[];
}

export const groupSendId = 'multicast';
/** Where a datagram to a group goes until another group is named. RFC 2365 section 6.2: an organisation's own. */
const usualGroup = '239.192.0.1';

export const sends: readonly Send[] = [
  ...probePresets.map((preset): Send => ({
    id: preset.id,
    name: preset.name,
    shows: preset.shows,
    to: needsHost(preset) ? 'host' : 'prescribed',
    versions: versionsOf(preset),
  })),
  {
    id: groupSendId,
    name: 'Multicast datagram',
    shows: 'Who gets what is sent to a group of your own.',
    to: 'group',
    // The group's address says which.
    versions: [],
  },
];

export const sendOf = (id: string): Send | undefined => sends.find((send) => send.id === id);

/** The probe of a send as it is by itself, before anything about it is changed. Throws where its host is missing. */
export const usualProbe = (
  design: Design,
  send: Send,
  choice: {
    readonly source: ProbeInput['source'];
    readonly to?: string;
    readonly version?: IpVersion;
  },
): ProbeInput => {
  const { source, to, version } = choice;
  if (send.to !== 'group')
    return probeOfPreset(design, send.id, {
      source,
      ...(to === undefined ? {} : { host: to }),
      ...(version === undefined ? {} : { version }),
    });
  const group = to ?? usualGroup;
  const isV6 = ipaddr.isValid(group) && ipaddr.parse(group).kind() === 'ipv6';
  return {
    source,
    destination: { kind: 'multicast', group },
    // Sizes are a usual one of telemetry: common practice, no source.
    packet: { kind: 'ip', version: isV6 ? 'ipv6' : 'ipv4', packetBytes: 256, hopLimit: 16, protocol: 17 },
  };
};
