import type { Design } from '../../engine/model/design.ts';
import type { CableGeometry, LabelGeometry, Rect, RingGeometry, SiteGeometry } from '../geometry.ts';
import { text } from '../parts/sizes.ts';
import { textWidth } from '../text-width.ts';
import type { LandingRun } from './cable-ends.ts';
import type { Occupied } from './free-places.ts';
import { landingLabel } from './label-text.ts';
import { rectIndex } from './rect-index.ts';
import { around, contains, frameLines, grown, outward, right } from './rects.ts';
import { labelBeside } from './combs.ts';

const height = 16;

/** A ring's address: under its comb where that is free, else over it. */
export const placeRingLabels = (
  rings: readonly RingGeometry[],
  taken: Occupied,
): readonly { readonly ring: RingGeometry; readonly crowded: boolean }[] =>
  rings.map((ring) => {
    const { label } = ring;
    const boxes = [
      ...ring.groups.flatMap((group) => group.ferrules.map((f) => f.rect)),
      ...(ring.manifold === undefined ? [] : [ring.manifold.rect]),
    ];
    const bounds = around(boxes);
    const candidates: readonly LabelGeometry[] =
      bounds === undefined
        ? [label]
        : (['below', 'above'] as const).flatMap((where) => {
            const plain = labelBeside(label.text, bounds, { side: ring.side, ...ring.centre }, where);
            // Clear of the spine of a comb beside it.
            return [plain, movedBy(plain, outward[ring.side].x * 10)];
          });
    const free = candidates.find((candidate) => !taken.hits(candidate.rect));
    const chosen = free ?? label;
    taken.add(chosen.rect);
    return { ring: { ...ring, label: chosen }, crowded: free === undefined };
  });

const movedBy = (label: LabelGeometry, x: number): LabelGeometry => ({
  ...label,
  at: { ...label.at, x: label.at.x + x },
  rect: { ...label.rect, x: label.rect.x + x },
});

const labelAt = (
  words: string,
  x: number,
  baseline: number,
  anchor: LabelGeometry['anchor'],
): LabelGeometry => {
  const width = textWidth(words, text.label);
  const left = anchor === 'start' ? x : anchor === 'end' ? x - width : x - width / 2;
  return { text: words, at: { x, y: baseline }, anchor, rect: { x: left, y: baseline - 13, width, height } };
};

/** Where an outside address may stand: over or under the level run that lands, near its band, inside the site's frame first. */
function* candidatesFor(
  words: string,
  cable: CableGeometry,
  frame: Rect | undefined,
): Generator<LabelGeometry, void> {
  const { polyline } = cable;
  const below = polyline.length > 2 && polyline[1]!.y > polyline[0]!.y;
  for (let run = polyline.length - 2; run >= 0; run -= 1) {
    const p = polyline[run]!;
    const q = polyline[run + 1]!;
    if (p.y !== q.y) {
      const y = (p.y + q.y) / 2;
      yield labelAt(words, p.x + 6, y + 5, 'start');
      yield labelAt(words, p.x - 6, y + 5, 'end');
      continue;
    }
    const fromRight = p.x > q.x;
    const inFrame = frame !== undefined && contains(frame, p);
    const ends = [
      ...(inFrame
        ? [fromRight ? Math.max(q.x + 16, frame.x + 6) : Math.min(q.x - 16, right(frame) - 6)]
        : []),
      fromRight ? q.x + 16 : q.x - 16,
    ];
    const anchor = fromRight ? 'start' : 'end';
    const lines = below ? [p.y + 16, p.y - 5] : [p.y - 5, p.y + 16];
    for (const x of ends) for (const line of lines) yield labelAt(words, x, line, anchor);
    const towards = fromRight ? 1 : -1;
    for (let along = 24; along < Math.abs(p.x - q.x); along += 24)
      for (const line of lines) yield labelAt(words, ends[0]! + towards * along, line, anchor);
  }
}

/** The outside address of every WAN cable. */
export const placeLandingLabels = (
  design: Design,
  cables: readonly { readonly geometry: CableGeometry; readonly landing?: LandingRun }[],
  sites: readonly SiteGeometry[],
  taken: Occupied,
): readonly { readonly geometry: CableGeometry; readonly crowded: boolean }[] => {
  const lines = rectIndex(
    (line: Rect) => line,
    sites.flatMap((site) => frameLines(site.rect)),
  );
  const frames = new Map(sites.map((site) => [site.id, site.rect]));
  return cables.map(({ geometry, landing }) => {
    if (landing === undefined || geometry.noWay) return { geometry, crowded: false };
    const device = design.devices[landing.from.device];
    const words = landingLabel(landing.landing, device, landing.from.member);
    if (words === '') return { geometry, crowded: false };
    const frame = frames.get(device?.site ?? '');
    let first: LabelGeometry | undefined;
    let free: LabelGeometry | undefined;
    for (const candidate of candidatesFor(words, geometry, frame)) {
      first ??= candidate;
      if (taken.hits(candidate.rect)) continue;
      // Rather off the lines of frames than on them, where there is the choice.
      if (!lines.isAny(grown(candidate.rect, 1))) {
        free = candidate;
        break;
      }
      free ??= candidate;
    }
    const label = free ?? first!;
    taken.add(label.rect);
    return { geometry: { ...geometry, label }, crowded: free === undefined };
  });
};
