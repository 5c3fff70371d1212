import { elementKey } from '../decorations.ts';
import type { CombGroup, FerruleGeometry, RingGeometry } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import type { CordSegment, DrawingFacts } from './drawing-facts.ts';
import { ferruleMark } from './ferrule.ts';
import { boxHalo } from './highlight.ts';
import type { Look } from './look.ts';
import { dimmedOpacity, hiddenOpacity, tonesOf } from './look.ts';
import { comb, ring as size } from './sizes.ts';
import { centredLine, labelText } from './text-shape.ts';
import { tunnelHidden } from './tunnel-look.ts';

const outward = { left: [-1, 0], right: [1, 0], top: [0, -1], bottom: [0, 1] } as const;

/** The short ink neck between the edge the ring docks on and the ring. */
const neck = (ring: RingGeometry): Shape => {
  const [dx, dy] = outward[ring.side];
  const reach = ring.docksOn === 'bracket' ? size.offBracket : size.offPlate;
  const half = size.neckHeight / 2;
  const length = reach - size.radius + 2;
  const edge = { x: ring.centre.x - dx * reach, y: ring.centre.y - dy * reach };
  return {
    ...shape('rect', {
      x: Math.min(edge.x, edge.x + dx * length) - Math.abs(dy) * half,
      y: Math.min(edge.y, edge.y + dy * length) - Math.abs(dx) * half,
      width: dx === 0 ? size.neckHeight : length,
      height: dy === 0 ? size.neckHeight : length,
      fill: paint('ink'),
    }),
    key: 'neck',
  };
};

const combLines = (ring: RingGeometry): readonly Shape[] => {
  if (ring.comb !== undefined) {
    const { arm, spine } = ring.comb;
    return [
      {
        ...shape('line', {
          x1: arm[0].x,
          y1: arm[0].y,
          x2: arm[1].x,
          y2: arm[1].y,
          stroke: paint('ink'),
          strokeWidth: comb.arm,
        }),
        key: 'arm',
      },
      {
        ...shape('line', {
          x1: spine[0].x,
          y1: spine[0].y,
          x2: spine[1].x,
          y2: spine[1].y,
          stroke: paint('ink'),
          strokeWidth: comb.spine,
          strokeLinecap: 'round',
        }),
        key: 'spine',
      },
    ];
  }
  const [dx, dy] = outward[ring.side];
  if (ring.groups.length === 0) return [];
  return [
    {
      ...shape('line', {
        x1: ring.centre.x + dx * (size.radius - 1),
        y1: ring.centre.y + dy * (size.radius - 1),
        x2: ring.centre.x + dx * (size.toFerrule + 1),
        y2: ring.centre.y + dy * (size.toFerrule + 1),
        stroke: paint('ink'),
        strokeWidth: comb.arm,
      }),
      key: 'arm',
    },
  ];
};

const ferrulePart = (
  ring: RingGeometry,
  place: FerruleGeometry,
  facts: DrawingFacts,
  look: Look,
): Shape | undefined => {
  const tunnel = facts.tunnels[place.tunnel];
  if (tunnel === undefined) return undefined;
  const ref = { collection: 'tunnels' as const, id: place.tunnel };
  const tones = tonesOf(look, ref);
  // The ring says which end this is; a ferrule's own end counts along its association.
  const end = tunnel.endpoints.a === ring.endpoint ? 'a' : 'b';
  const far = end === 'a' ? 'b' : 'a';
  const cut = look.decorations.cuts.find((c) => c.tunnel === place.tunnel);
  const vni = cut?.vnis?.[end] ?? tunnel.vni[end];
  const farVni = cut?.vnis?.[far];
  const faded = tunnelHidden(tunnel, look);
  const opacity = faded
    ? hiddenOpacity
    : tones.includes('dimmed') || tones.includes('failed') || tones.includes('removed')
      ? dimmedOpacity
      : undefined;
  return group(
    ferruleMark({
      rect: place.rect,
      capSide: place.capSide,
      segments: tunnel.segments,
      level: look.level,
      fault: cut !== undefined || tones.includes('fault'),
      selected: tones.includes('selected') || tones.includes('hovered'),
      lit: tones.includes('lit'),
      ...(vni === undefined ? {} : { vni }),
      ...(tunnel.count === undefined ? {} : { words: `${tunnel.count} ×` }),
      ...(farVni === undefined ? {} : { farVni }),
    }),
    {
      key: `${place.tunnel}-${end}`,
      data: { ref, part: `ferrule-${end}` },
      ...(opacity === undefined ? {} : { attrs: { opacity } }),
    },
  );
};

/** All segments that leave a ring, once each, in letter order. */
const segmentsOf = (groups: readonly CombGroup[], facts: DrawingFacts): readonly CordSegment[] => {
  const ids = new Set(
    groups.flatMap((g) =>
      g.ferrules.flatMap((f) => (facts.tunnels[f.tunnel]?.segments ?? []).map((s) => s.id)),
    ),
  );
  return facts.segments.filter((segment) => ids.has(segment.id));
};

/** More groups than a comb can hold, as one brass bar with their count and letters. */
const manifoldBar = (ring: RingGeometry, facts: DrawingFacts, look: Look): readonly Shape[] => {
  if (ring.manifold === undefined) return [];
  const { rect, tunnels } = ring.manifold;
  const x = rect.x + rect.width / 2;
  const segments = segmentsOf(ring.groups, facts);
  const letters = segments.map((segment) => segment.letter);
  const shown =
    letters.length <= 4 ? letters.join(' ') : `${letters.slice(0, 3).join(' ')} +${letters.length - 3}`;
  const middle = rect.y + rect.height / 2;
  const far = look.level === 'far';
  return [
    {
      ...shape('rect', {
        ...rect,
        rx: 2,
        fill: paint('brass'),
        stroke: paint('ink'),
        strokeWidth: 1.6,
      }),
      key: 'manifold',
    },
    ...(far
      ? []
      : [
          centredLine(String(tunnels), x, middle - 9, {
            sizePx: 19,
            weight: 700,
            anchor: 'middle',
            key: 'count',
            fill: paint('on-brass'),
          }),
          centredLine(shown, x, middle + 14, {
            sizePx: letters.length > 3 ? 9.5 : 12,
            weight: 700,
            anchor: 'middle',
            key: 'letters',
            fill: paint('on-brass'),
          }),
        ]),
  ];
};

/** An endpoint: ring on its neck, comb or manifold, the ferrules of its tunnels and its address. */
export const ringPart = (ring: RingGeometry, facts: DrawingFacts, look: Look): Shape => {
  const ref = { collection: 'endpoints' as const, id: ring.endpoint };
  const tones = tonesOf(look, ref);
  const box = {
    x: ring.centre.x - size.radius,
    y: ring.centre.y - size.radius,
    width: 2 * size.radius,
    height: 2 * size.radius,
  };
  const marked = tones.includes('selected') || tones.includes('hovered');
  const detailed = look.level === 'near' || look.level === 'work';
  const own = group(
    [
      (marked || tones.includes('lit')) && {
        ...boxHalo(box, tones.includes('lit')),
        attrs: { ...boxHalo(box, tones.includes('lit')).attrs, rx: size.radius + 5 },
      },
      neck(ring),
      ...combLines(ring),
      {
        ...shape('circle', {
          cx: ring.centre.x,
          cy: ring.centre.y,
          r: size.radius,
          fill: paint('brass'),
          stroke: paint(tones.includes('fault') ? 'red' : 'ink'),
          strokeWidth: tones.includes('fault') ? 2.4 : 1.6,
        }),
        key: 'ring',
      },
      {
        ...shape('circle', {
          cx: ring.centre.x,
          cy: ring.centre.y,
          r: size.hole,
          fill: paint('paper'),
          stroke: paint('ink'),
          strokeWidth: 1.6,
        }),
        key: 'hole',
      },
      ...manifoldBar(ring, facts, look),
      // A drawing without addresses has no words here.
      detailed &&
        ring.label.text !== '' && {
          ...labelText(ring.label, {
            sizePx: look.level === 'work' ? 13.6 : 14,
            weight: 500,
            haloPx: 5,
          }),
          key: 'address',
        },
    ],
    {
      key: 'ring',
      data: { ref, part: 'ring' },
      ...(tones.includes('dimmed') ? { attrs: { opacity: dimmedOpacity } } : {}),
    },
  );
  const ferrules =
    ring.manifold !== undefined
      ? []
      : ring.groups.flatMap((g) => g.ferrules.map((place) => ferrulePart(ring, place, facts, look)));
  return group([own, ...ferrules], { key: elementKey(ref), data: { ref } });
};
