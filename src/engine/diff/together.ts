import type { Collection, Design, Entry } from '../model/design.ts';
import { collections } from '../model/design.ts';

type Bag = Readonly<Record<string, unknown>>;

/**
 * Both designs in one, for drawing what differs: the second as it is, and what only the first had where it stood there. Not a
 * design to check or to save: what was removed may contradict what took its place.
 */
export const together = (before: Design, after: Design): Design => ({
  ...after,
  ...Object.fromEntries(collections.map((collection) => [collection, both(before, after, collection)])),
  layout: bothLayouts(before.layout, after.layout),
});

const both = (before: Design, after: Design, collection: Collection): Bag => {
  const [old, now] = [before[collection] as Bag, after[collection] as Bag];
  const all: Record<string, unknown> = { ...old, ...now };
  // A cable that was removed may have been in a port that was, too.
  if (collection === 'devices')
    for (const [id, device] of Object.entries(now) as [string, Entry<'devices'>][]) {
      const was = old[id] as Entry<'devices'> | undefined;
      if (was !== undefined) all[id] = { ...device, ports: { ...was.ports, ...device.ports } };
    }
  return all;
};

const bothLayouts = (old: Design['layout'], now: Design['layout']): Design['layout'] => {
  const places = ['sites', 'devices', 'transports', 'endpoints', 'notes'] as const;
  return {
    ...old,
    ...now,
    ...Object.fromEntries(
      places
        .filter((key) => old[key] !== undefined || now[key] !== undefined)
        .map((key) => [key, { ...old[key], ...now[key] }]),
    ),
  };
};
