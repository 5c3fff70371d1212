import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { Standing } from './move-parts.ts';

/** The devices that an element hangs on: it goes where all of them go. */
const devicesUnder = (design: Design, { collection, id }: ElementRef): readonly string[] => {
  switch (collection) {
    case 'devices':
      return [id];
    case 'endpoints':
      return [design.endpoints[id]!.device];
    case 'forwarders':
      return [design.forwarders[id]!.device];
    case 'links': {
      const link = design.links[id]!;
      return link.kind === 'cable' ? [link.a.device, link.b.device] : [link.device];
    }
    case 'associations': {
      const { a, b } = design.associations[id]!;
      return [a.device, b.device];
    }
    case 'tunnels': {
      const { a, b } = design.tunnels[id]!;
      return [design.endpoints[a.endpoint]!.device, design.endpoints[b.endpoint]!.device];
    }
    default:
      return [];
  }
};

/**
 * The notes that go along when elements move: those pinned to what moves, and those without a pin that stand in the frame
 * of a site that moves. A note that nobody placed stands by its element anyhow.
 */
export const notesAlong = (
  design: Design,
  standing: Standing,
  moved: readonly ElementRef[],
): readonly ElementRef[] => {
  const own = (collection: ElementRef['collection']): ReadonlySet<string> =>
    new Set(moved.filter((ref) => ref.collection === collection).map(({ id }) => id));
  const [sites, devices, transports, notes] = [own('sites'), own('devices'), own('transports'), own('notes')];
  const goes = (device: string): boolean =>
    devices.has(device) || sites.has(design.devices[device]?.site ?? '');
  const standsIn = (site: string, note: string): boolean => {
    const [frame, at] = [standing.sites[site], standing.notes[note]];
    return (
      frame !== undefined &&
      at !== undefined &&
      at.x >= frame.x &&
      at.x <= frame.x + frame.width &&
      at.y >= frame.y &&
      at.y <= frame.y + frame.height
    );
  };
  return Object.entries(design.notes)
    .filter(([id, { target, standing: isStanding }]) => {
      if (isStanding === true || notes.has(id) || design.layout.notes?.[id] === undefined) return false;
      if (target === undefined) return [...sites].some((site) => standsIn(site, id));
      if (target.collection === 'sites') return sites.has(target.id);
      if (target.collection === 'transports') return transports.has(target.id);
      const under = devicesUnder(design, target);
      return under.length > 0 && under.every(goes);
    })
    .map(([id]): ElementRef => ({ collection: 'notes', id }));
};
