import { elementKey } from '../decorations.ts';
import type { SheetGeometry, TrunkGeometry } from '../geometry.ts';
import { offsetPath, pathData } from '../path-geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint, segmentPaint } from '../theme/paint.ts';
import type { CordSegment, DrawingFacts } from './drawing-facts.ts';
import type { Look } from './look.ts';
import { dimmedOpacity, tonesOf } from './look.ts';

const hairline = { widthPx: 2.6, apartPx: 5, most: 4 } as const;
const edgePx = 1.2;

type Piece = TrunkGeometry['pieces'][number];

const stroke = (d: string, colour: string, strokeWidth: number, key: string): Shape => ({
  ...shape('path', {
    d,
    fill: 'none',
    stroke: colour,
    strokeWidth,
    strokeLinecap: 'round',
    strokeLinejoin: 'round',
  }),
  key,
});

/** The segments that pass through one piece of a trunk, in legend order. */
const segmentsIn = (piece: Piece, geometry: SheetGeometry, facts: DrawingFacts): readonly CordSegment[] => {
  const inside = new Set(piece.jackets);
  const ids = new Set(
    geometry.jackets
      .filter((jacket) => inside.has(jacket.id))
      .flatMap((jacket) => jacket.lanes)
      .flatMap((lane) => facts.tunnels[lane.tunnel]?.segments ?? [])
      .map((segment) => segment.id),
  );
  return facts.segments.filter((segment) => ids.has(segment.id)).slice(0, hairline.most);
};

/** The common way of a manifold's jackets: one outline, one body, and a hairline for each of up to four segments. */
export const trunkPart = (
  trunk: TrunkGeometry,
  geometry: SheetGeometry,
  facts: DrawingFacts,
  look: Look,
): Shape => {
  const ref = { collection: 'endpoints' as const, id: trunk.endpoint };
  const body = paint(trunk.isProtected ? 'jacket' : 'casing');
  const edge = paint(trunk.isProtected ? 'jacket-edge' : 'casing');
  const pieces = trunk.pieces.map((piece) => ({ piece, d: pathData(piece.path) }));
  const hairlines = trunk.pieces.flatMap((piece, i) => {
    const segments = segmentsIn(piece, geometry, facts);
    return segments.map((segment, k) =>
      stroke(
        pathData(offsetPath(piece.path, (k - (segments.length - 1) / 2) * hairline.apartPx)),
        segmentPaint(segment.palette, trunk.isProtected).core,
        hairline.widthPx,
        `segment-${i}-${segment.id}`,
      ),
    );
  });
  return group(
    [
      ...pieces.map(({ piece, d }, i) => stroke(d, edge, piece.width + 2 * edgePx, `edge-${i}`)),
      ...pieces.map(({ piece, d }, i) => stroke(d, body, piece.width, `body-${i}`)),
      ...hairlines,
    ],
    {
      key: `trunk-${elementKey(ref)}`,
      data: { ref, part: 'trunk' },
      ...(tonesOf(look, ref).includes('dimmed') ? { attrs: { opacity: dimmedOpacity } } : {}),
    },
  );
};
