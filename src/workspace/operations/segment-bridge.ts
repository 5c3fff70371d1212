import type { DeepReadonly, Design } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { patchAt } from '../../engine/model/merge-patch.ts';
import type { Circuit, Forwarder } from '../../engine/model/overlay.ts';
import type { NumberingContext } from '../../engine/numbering/numbering-context.ts';
import { freeVlan } from './free-names.ts';

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

/** Lets a segment land at a site where it does not yet: on the VLAN that it has at most other sites, else on a free one. */
export const landSegment = (
  design: Design,
  segment: string,
  site: string,
  context: NumberingContext,
): MergePatch => {
  const { sites } = design.segments[segment]!;
  if (sites[site] !== undefined) return {};
  const counts = new Map<number, number>();
  for (const { vlan } of Object.values(sites))
    if (vlan !== undefined) counts.set(vlan, (counts.get(vlan) ?? 0) + 1);
  const [usual] = [...counts].sort(([a, n], [b, m]) => m - n || a - b);
  return patchAt(['segments', segment, 'sites', site], { vlan: usual?.[0] ?? freeVlan(design, context) });
};

const forwardersOn = (
  design: Design,
  device: string,
): readonly (readonly [string, DeepReadonly<Forwarder>])[] =>
  Object.entries(design.forwarders)
    .filter(([, forwarder]) => forwarder.device === device)
    .sort(([a], [b]) => (a < b ? -1 : 1));
