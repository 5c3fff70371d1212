import type { Design } from '../model/design.ts';
import { entryOf } from '../network/network.ts';
import { ETHERNET_HEADER_BYTES, FCS_BYTES, STANDARD_PAYLOAD_BYTES } from '../reference/ethernet.ts';
import { IP_HEADER_BYTES, type IpVersion } from '../reference/ip.ts';
import type { ProbeInput } from './probe.ts';
import type { PresetTarget, ProbePreset } from './probe-presets.ts';
import { probePresets } from './probe-presets.ts';

const presetNames = probePresets.map(({ id }) => id).join(', ');

/** The IP versions that a preset has; none for frames without IP. */
export const versionsOf = (preset: ProbePreset): readonly IpVersion[] =>
  'versions' in preset ? (Object.keys(preset.versions) as IpVersion[]) : [];

/** Whether a preset needs a host to send to. */
export const needsHost = (preset: ProbePreset): boolean =>
  'versions' in preset
    ? Object.values(preset.versions).some(({ target }) => target === 'host')
    : preset.target === 'host';

/** The largest IP packet that a source keeps to: what its segment is committed to, else its port's MTU, else 1500. */
const fullPacketBytes = (design: Design, source: ProbeInput['source']): number => {
  const device = 'host' in source ? design.devices[source.host] : undefined;
  if (device === undefined) return STANDARD_PAYLOAD_BYTES;
  const segment =
    device.kind === 'host' && device.segment !== undefined
      ? entryOf(design.segments, device.segment).mtu
      : undefined;
  const ports = Object.values(device.ports).flatMap(({ mtu }) => (mtu === undefined ? [] : [mtu]));
  return segment ?? (ports.length === 0 ? STANDARD_PAYLOAD_BYTES : Math.min(...ports));
};

/**
 * The probe of a preset from a source, to a host where it needs one. Throws where the preset is unknown, has no such IP
 * version or lacks its host, all of which `versionsOf` and `needsHost` tell beforehand.
 */
export const probeOfPreset = (
  design: Design,
  presetId: string,
  choice: {
    readonly source: ProbeInput['source'];
    readonly host?: string;
    readonly version?: IpVersion;
  },
): ProbeInput => {
  const preset = probePresets.find(({ id }) => id === presetId);
  if (preset === undefined) throw new Error(`preset is ${presetId}: expected one of ${presetNames}`);
  const { source, host, version = versionsOf(preset)[0] } = choice;
  const destinationOf = (target: PresetTarget): ProbeInput['destination'] => {
    if (target !== 'host') return target;
    if (host === undefined) throw new Error(`host is missing: ${presetId} goes to one host, name it`);
    return { kind: 'host', host };
  };
  const full = fullPacketBytes(design, source);
  if (!('versions' in preset)) {
    const { frame, frameBytes, target } = preset;
    return {
      source,
      destination: destinationOf(target),
      packet: {
        kind: 'non-ip',
        ...frame,
        frameBytes: frameBytes === 'full-size' ? ETHERNET_HEADER_BYTES + full + FCS_BYTES : frameBytes,
      },
    };
  }
  const form = version === undefined ? undefined : preset.versions[version];
  if (version === undefined || form === undefined)
    throw new Error(`version is ${version}: ${presetId} has ${versionsOf(preset).join(' and ')}`);
  const { bytes, optionBytes = 0, protocol, target } = form;
  return {
    source,
    destination: destinationOf(target),
    packet: {
      kind: 'ip',
      version,
      ...preset.packet,
      ...(protocol === undefined ? {} : { protocol }),
      packetBytes: bytes === 'full-size' ? full : IP_HEADER_BYTES[version] + optionBytes + bytes,
      sourceMtuBytes: full,
    },
  };
};
