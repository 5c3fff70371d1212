import type { Design } from '../../engine/model/design.ts';
import type { TraceSource } from './trace-question.ts';

/** The segment that a frame belongs to by where it starts, and its VLAN there; undefined where the design doesn't say. */
export const segmentOf = (
  design: Design,
  source: TraceSource,
): { readonly id: string; readonly vlan?: number } | undefined => {
  const device = design.devices['host' in source ? source.host : source.device];
  const site = device?.site;
  const vlanOf = (id: string): number | undefined =>
    site === undefined ? undefined : design.segments[id]?.sites[site]?.vlan;
  if (device?.kind === 'host') {
    const id = device.segment;
    if (id === undefined) return undefined;
    const vlan = vlanOf(id);
    return { id, ...(vlan === undefined ? {} : { vlan }) };
  }
  const vlan = 'host' in source ? undefined : device?.ports[source.port]?.vlan;
  const id =
    vlan === undefined ? undefined : Object.keys(design.segments).find((one) => vlanOf(one) === vlan);
  return id === undefined ? undefined : { id, ...(vlan === undefined ? {} : { vlan }) };
};
