import type { Design } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { indexNetwork } from '../network/index-network.ts';
import { deviceAt } from './device-at.ts';
import type { ProbeInput } from './probe.ts';
import type { Trace } from './trace.ts';
import type { WhatFits } from './what-fits.ts';

/**
 * Who a frame was meant to get to and doesn't: on the way to one host all devices beyond the one that ends it, else the
 * hosts of the sender's segment, or without one those that a shorter frame reaches. `fits` is what `whatFits` says of it.
 */
export const unreached = (
  design: Design,
  { source, destination }: ProbeInput,
  { steps, deliveries }: Trace,
  fits: WhatFits | undefined,
): readonly Id[] => {
  const reached = new Set(deliveries.map(({ device }) => device));
  if (destination.kind === 'host') {
    if (reached.has(destination.host)) return [];
    const passed = new Set<Id>();
    const facts = indexNetwork(design).design;
    for (const { from, elements, parent } of steps) {
      if (from !== undefined) passed.add(deviceAt(facts, from));
      else if (parent === undefined && elements[0]?.collection === 'devices') passed.add(elements[0].id);
    }
    return fits === undefined ? [destination.host] : fits.devices.filter((id) => !passed.has(id));
  }
  const sender = 'host' in source ? design.devices[source.host] : undefined;
  const segment = sender?.kind === 'host' ? sender.segment : undefined;
  const isForBridges = destination.kind === 'reserved';
  const meant =
    segment === undefined || isForBridges
      ? (fits?.reached ?? [])
      : Object.entries(design.devices).flatMap(([id, device]) =>
          device.kind === 'host' && device.segment === segment && device !== sender ? [id] : [],
        );
  return meant.filter((id) => !reached.has(id));
};
