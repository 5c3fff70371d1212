import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { Plug } from '../../engine/model/underlay.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';

/** Somewhere that a cord or a cable leads to. */
export interface FarEnd {
  /** What is followed. */
  readonly along: ElementRef;
  /** Where it ends. */
  readonly at: ElementRef;
  /** Both in few words: 'tn-gul to fw-gul'. */
  readonly words: string;
}

const plugRef = ({ device, port, member }: Plug): ElementRef => ({
  collection: 'devices',
  id: device,
  port,
  ...(member === undefined ? {} : { member }),
});

/** Both ends of something that joins two: of a tunnel its endpoints, of a cable its ports. */
const endsOf = (design: Design, { collection, id }: ElementRef): readonly ElementRef[] => {
  if (collection === 'tunnels') {
    const tunnel = design.tunnels[id];
    return tunnel === undefined
      ? []
      : [tunnel.a, tunnel.b].map(({ endpoint }) => ({ collection: 'endpoints', id: endpoint }));
  }
  if (collection === 'associations') {
    const association = design.associations[id];
    return association === undefined
      ? []
      : [association.a, association.b].map(({ device }) => ({ collection: 'devices', id: device }));
  }
  const link = collection === 'links' ? design.links[id] : undefined;
  if (link === undefined) return [];
  return link.kind === 'cable'
    ? [plugRef(link.a), plugRef(link.b)]
    : [
        { collection: 'devices', id: link.device, port: link.port },
        { collection: 'transports', id: link.transport },
      ];
};

/** Whether an end belongs to an element: to the port itself, or to the device that has it. */
const isAt = (end: ElementRef, ref: ElementRef): boolean =>
  end.collection === ref.collection &&
  end.id === ref.id &&
  (ref.port === undefined || end.port === ref.port) &&
  (ref.member === undefined || end.member === undefined || end.member === ref.member);

const placeOf = (design: Design, end: ElementRef): string =>
  end.collection === 'endpoints'
    ? (design.devices[design.endpoints[end.id]?.device ?? '']?.name ?? nameOf(design, end))
    : nameOf(design, end);

/** A cable without a name is known by its ends, of which one is where it leads. */
const leadsTo = (design: Design, along: ElementRef, at: ElementRef): FarEnd => {
  const isNamed = along.collection !== 'links' || design.links[along.id]?.name !== undefined;
  return { along, at, words: `${isNamed ? `${nameOf(design, along)} ` : ''}to ${placeOf(design, at)}` };
};

/**
 * Where one gets from an element: both ends of what joins two, the far end of everything that begins at an endpoint, a
 * port or a device. In the order of their names.
 */
export const farEnds = (design: Design, ref: ElementRef): readonly FarEnd[] => {
  const own = endsOf(design, ref);
  if (own.length > 0) return own.map((at) => ({ along: ref, at, words: `to ${placeOf(design, at)}` }));
  const from = (collection: 'tunnels' | 'links', isHere: (end: ElementRef) => boolean): readonly FarEnd[] =>
    Object.keys(design[collection]).flatMap((id) => {
      const along: ElementRef = { collection, id };
      const [a, b] = endsOf(design, along) as [ElementRef, ElementRef];
      // A pair's member links lead from the pair to itself.
      if (isHere(a) === isHere(b)) return [];
      return [leadsTo(design, along, isHere(a) ? b : a)];
    });
  const found =
    ref.collection === 'endpoints'
      ? from('tunnels', (end) => isAt(end, ref))
      : ref.collection === 'devices' && ref.port !== undefined
        ? from('links', (end) => isAt(end, ref))
        : ref.collection === 'devices'
          ? [
              ...from('tunnels', (end) => design.endpoints[end.id]?.device === ref.id),
              ...from('links', (end) => isAt(end, ref)),
            ]
          : [];
  return [...found].sort((a, b) => a.words.localeCompare(b.words, 'en', { numeric: true }));
};
