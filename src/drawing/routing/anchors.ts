import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { JacketGeometry, LaneGeometry, PipGeometry, Point, Rect, SheetGeometry } from '../geometry.ts';
import { longestRun, pathAt, pathLength } from '../path-geometry.ts';
import { bottom, right } from './rects.ts';

const middleOfRun = (path: LaneGeometry['path']): Point => {
  const run = longestRun(path);
  const { x, y } = pathAt(path, run === undefined ? pathLength(path) / 2 : (run.from + run.to) / 2);
  return { x, y };
};

/** The middle of a jacket's longest straight run, keeping off the places where another lies over it. */
const onJacket = (geometry: SheetGeometry, jacket: JacketGeometry): Point => {
  const { polyline } = jacket;
  const over = geometry.jackets.flatMap((other) =>
    other.crossings.flatMap((crossing) =>
      crossing.over === jacket.id ? [pathAt(crossing.path, pathLength(crossing.path) / 2)] : [],
    ),
  );
  let best: Point = middleOfRun(jacket.path);
  let length = 0;
  polyline.slice(1).forEach((q, i) => {
    const p = polyline[i]!;
    const level = p.y === q.y;
    const [from, to] = level
      ? [Math.min(p.x, q.x), Math.max(p.x, q.x)]
      : [Math.min(p.y, q.y), Math.max(p.y, q.y)];
    const cuts = over
      .filter((at) => (level ? Math.abs(at.y - p.y) < 1 : Math.abs(at.x - p.x) < 1))
      .map((at) => (level ? at.x : at.y))
      .filter((at) => at > from && at < to);
    const stops = [from, ...cuts.sort((a, b) => a - b), to];
    stops.slice(1).forEach((end, k) => {
      const start = stops[k]!;
      if (end - start <= length) return;
      length = end - start;
      const middle = (start + end) / 2;
      best = level ? { x: middle, y: p.y } : { x: p.x, y: middle };
    });
  });
  return polyline.length > 2 && length < 2 * jacket.width ? middleOfRun(jacket.path) : best;
};

const rightEdge = (rect: Rect): Point => ({ x: right(rect) - 8, y: rect.y });

/**
 * The point of the sheet that an element is known by: where a balloon's leader ends and whose zone is named. Undefined
 * for elements that have no place on the sheet. Segments, demands and profiles have none; a forwarder's is its device's.
 */
export const anchorOf = (geometry: SheetGeometry, ref: ElementRef, design?: Design): Point | undefined => {
  const deviceAt = (id: string, port?: string, member?: 1 | 2): Point | undefined => {
    const device = geometry.devices.find((d) => d.id === id);
    if (device === undefined) {
      const site = design?.devices[id]?.site;
      return site === undefined ? undefined : anchorOf(geometry, { collection: 'sites', id: site });
    }
    const pip: PipGeometry | undefined =
      port === undefined
        ? undefined
        : device.pips.find((p) => p.port === port && (member === undefined || p.member === member));
    if (pip !== undefined) return pip.at;
    const { rect } = device.plates.find((p) => p.member === member) ?? device.plates[0]!;
    // A pair has WAN pips at the corners; it is pointed at from the gap that its bracket leaves, or from its free side.
    return device.kind === 'ha-pair' ? { x: rect.x, y: rect.y + 13 } : rightEdge(rect);
  };
  switch (ref.collection) {
    case 'devices':
      return deviceAt(ref.id, ref.port, ref.member);
    case 'sites': {
      const site = geometry.sites.find((s) => s.id === ref.id);
      return site === undefined ? undefined : { x: right(site.rect) - 24, y: site.rect.y };
    }
    case 'transports': {
      const band = geometry.bands.find((b) => b.id === ref.id);
      return band === undefined ? undefined : { x: right(band.text.rect) - 10, y: band.text.rect.y + 10 };
    }
    case 'links': {
      const cable = geometry.cables.find((c) => c.links.includes(ref.id));
      return cable === undefined ? undefined : middleOfRun(cable.path);
    }
    case 'endpoints':
      return geometry.rings.find((ring) => ring.endpoint === ref.id)?.centre;
    case 'associations': {
      const jacket = geometry.jackets.find((j) => j.kind === 'jacket' && j.id === ref.id);
      return jacket === undefined ? undefined : onJacket(geometry, jacket);
    }
    case 'tunnels': {
      for (const jacket of geometry.jackets) {
        const lane = jacket.lanes.find((l) => l.tunnel === ref.id);
        if (lane !== undefined)
          return jacket.noWay ? middleOfRun(lane.path) : nearLane(onJacket(geometry, jacket), lane);
      }
      return undefined;
    }
    case 'forwarders': {
      const device = design?.forwarders[ref.id]?.device;
      return device === undefined ? undefined : deviceAt(device);
    }
    case 'notes': {
      const note = geometry.notes.find((n) => n.id === ref.id);
      return note === undefined ? undefined : { x: note.rect.x, y: bottom(note.rect) };
    }
    case 'segments':
    case 'demands':
    case 'profiles':
      return undefined;
  }
};

/** The point of a lane nearest to a point of its jacket's middle line. */
const nearLane = (point: Point, lane: LaneGeometry): Point => {
  const length = pathLength(lane.path);
  let best = point;
  let distance = Infinity;
  for (let along = 0; along <= length; along += 4) {
    const at = pathAt(lane.path, along);
    const d = Math.hypot(at.x - point.x, at.y - point.y);
    if (d >= distance) continue;
    distance = d;
    best = { x: at.x, y: at.y };
  }
  return best;
};
