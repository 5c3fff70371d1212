import type { DeepReadonly, Design } from '../../engine/model/design.ts';
import type { Circuit, Forwarder } from '../../engine/model/overlay.ts';

/** The forwarder on a gateway that takes a segment's frames at its site; of several the one with the lowest id. */
export const segmentBridge = (design: Design, device: string, segment: string): string | undefined => {
  const site = design.devices[device]?.site;
  const vlan = site === undefined ? undefined : design.segments[segment]?.sites[site]?.vlan;
  const takes = (circuit: DeepReadonly<Circuit>): boolean =>
    circuit.kind === 'port' &&
    (vlan === undefined
      ? circuit.vlans === 'untagged'
      : Array.isArray(circuit.vlans) && circuit.vlans.includes(vlan));
  return forwardersOn(design, device).find(([, forwarder]) =>
    Object.values(forwarder.circuits).some(takes),
  )?.[0];
};

/** True when no circuit of the gateway's forwarders takes frames from the port. */
export const isUnclaimed = (design: Design, device: string, port: string): boolean =>
  forwardersOn(design, device).every(([, forwarder]) =>
    Object.values(forwarder.circuits).every((circuit) => circuit.kind !== 'port' || circuit.port !== port),
  );

const forwardersOn = (
  design: Design,
  device: string,
): readonly (readonly [string, DeepReadonly<Forwarder>])[] =>
  Object.entries(design.forwarders)
    .filter(([, forwarder]) => forwarder.device === device)
    .sort(([a], [b]) => (a < b ? -1 : 1));
