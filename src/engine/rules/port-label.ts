import type { ElementRef } from '../model/design.ts';
import type { DesignFacts } from '../network/network.ts';

/** A port by the name on its device: 'lan1', or 'port 3' where it has none. */
export const portName = (design: DesignFacts, device: string, port: string): string => {
  const entry = design.devices[device]!.ports[port]!;
  return entry.name ?? `port ${entry.number}`;
};

/** 'lan1 of fw-gul'; of a pair's member where one is meant. */
export const portLabel = (design: DesignFacts, device: string, port: string, member?: 1 | 2): string => {
  const entry = design.devices[device]!;
  const owner = member !== undefined && entry.kind === 'ha-pair' ? entry.memberNames[member] : entry.name;
  return `${portName(design, device, port)} of ${owner}`;
};

export const portRef = (device: string, port: string): ElementRef => ({
  collection: 'devices',
  id: device,
  port,
});
