import type { Design } from '#engine/model/design.ts';
import type { JacketGeometry, Point, Rect, SheetGeometry } from '#drawing/geometry.ts';
import { leastRadius } from '#drawing/parts/sizes.ts';
import { pathAt, pathLength } from '#drawing/path-geometry.ts';

// What a drawing must hold, as functions that name every place where it does not.

const right = (r: Rect): number => r.x + r.width;
const bottom = (r: Rect): number => r.y + r.height;
const overlap = (a: Rect, b: Rect, slack = 0): boolean =>
  a.x < right(b) - slack && b.x < right(a) - slack && a.y < bottom(b) - slack && b.y < bottom(a) - slack;
const inside = (outer: Rect, inner: Rect): boolean =>
  inner.x >= outer.x - 0.01 &&
  inner.y >= outer.y - 0.01 &&
  right(inner) <= right(outer) + 0.01 &&
  bottom(inner) <= bottom(outer) + 0.01;

interface Run {
  readonly of: string;
  readonly index: number;
  readonly last: boolean;
  readonly from: Point;
  readonly to: Point;
  readonly half: number;
}
const runsOf = (of: string, polyline: readonly Point[], half: number): readonly Run[] =>
  polyline.slice(1).map((to, index) => ({
    of,
    index,
    last: index === polyline.length - 2,
    from: polyline[index]!,
    to,
    half,
  }));
const jacketRuns = (geometry: SheetGeometry): readonly Run[] =>
  geometry.jackets.flatMap((j) => (j.noWay ? [] : runsOf(`${j.id}/${j.part ?? 0}`, j.polyline, j.width / 2)));
const cableRuns = (geometry: SheetGeometry): readonly Run[] =>
  geometry.cables.flatMap((c) => (c.noWay ? [] : runsOf(c.links[0]!, c.polyline, c.aggregated ? 5 : 1)));
const isLevel = (run: Run): boolean => run.from.y === run.to.y;
const groundOf = ({ from, to, half }: Run, along = 0): Rect => {
  const level = from.y === to.y;
  const x = Math.min(from.x, to.x) - (level ? along : half);
  const y = Math.min(from.y, to.y) - (level ? half : along);
  return {
    x,
    y,
    width: Math.abs(to.x - from.x) + 2 * (level ? along : half),
    height: Math.abs(to.y - from.y) + 2 * (level ? half : along),
  };
};

/** Pairs of jackets whose parallel runs lie nearer than their widths. */
export const closeRuns = (geometry: SheetGeometry): readonly string[] => {
  const runs = jacketRuns(geometry);
  const found: string[] = [];
  runs.forEach((p, i) => {
    for (const q of runs.slice(i + 1)) {
      if (p.of === q.of || isLevel(p) !== isLevel(q)) continue;
      const across = isLevel(p) ? Math.abs(p.from.y - q.from.y) : Math.abs(p.from.x - q.from.x);
      const axis = isLevel(p) ? 'x' : 'y';
      const shared =
        Math.min(Math.max(p.from[axis], p.to[axis]), Math.max(q.from[axis], q.to[axis])) -
        Math.max(Math.min(p.from[axis], p.to[axis]), Math.min(q.from[axis], q.to[axis]));
      if (shared > 1 && across < p.half + q.half - 0.7)
        found.push(`${p.of} beside ${q.of}: ${across} px apart`);
    }
  });
  return found;
};

/** Drawn middle lines that come nearer to each other than their widths away from a crossing, sampled every 4 px. */
export const touchingPaths = (geometry: SheetGeometry): readonly string[] => {
  const sampled = geometry.jackets
    .filter((jacket) => !jacket.noWay)
    .map((jacket) => {
      const length = pathLength(jacket.path);
      return {
        jacket,
        points: Array.from({ length: Math.floor(length / 4) + 1 }, (_, i) => pathAt(jacket.path, i * 4)),
      };
    });
  const crossed = (a: JacketGeometry, b: JacketGeometry): readonly Point[] =>
    [...a.crossings.filter((c) => c.over === b.id), ...b.crossings.filter((c) => c.over === a.id)].map((c) =>
      pathAt(c.path, pathLength(c.path) / 2),
    );
  const found: string[] = [];
  sampled.forEach((a, i) => {
    for (const b of sampled.slice(i + 1)) {
      const least = (a.jacket.width + b.jacket.width) / 2 - 1;
      const spots = crossed(a.jacket, b.jacket);
      const near = a.points.find((p) => {
        if (spots.some((s) => Math.hypot(s.x - p.x, s.y - p.y) < 1.5 * (a.jacket.width + b.jacket.width)))
          return false;
        return b.points.some((q) => Math.hypot(q.x - p.x, q.y - p.y) < least);
      });
      if (near !== undefined) found.push(`${a.jacket.id} touches ${b.jacket.id} at ${near.x},${near.y}`);
    }
  });
  return found;
};

const solidOf = (
  geometry: SheetGeometry,
): readonly { readonly name: string; readonly rect: Rect; readonly ring?: string }[] => [
  { name: 'title block', rect: geometry.sheet.titleBlock },
  { name: 'legend', rect: geometry.sheet.legend },
  ...geometry.devices.flatMap((device) =>
    device.plates.map((plate) => ({ name: `plate of ${device.id}`, rect: plate.rect })),
  ),
  ...geometry.rings.flatMap((ring) =>
    ring.groups.flatMap((group) =>
      group.ferrules.map((f) => ({ name: `ferrule of ${f.tunnel}`, rect: f.rect, ring: ring.endpoint })),
    ),
  ),
];

/** Jackets and cables that pass over a plate, a ferrule, the title block or the legend. */
export const throughSolid = (geometry: SheetGeometry): readonly string[] => {
  const solid = solidOf(geometry);
  return [...jacketRuns(geometry), ...cableRuns(geometry)].flatMap((run) =>
    solid.filter(({ rect }) => overlap(groundOf(run), rect, 1.6)).map(({ name }) => `${run.of} over ${name}`),
  );
};

/** Cords that pass over a faceplate: what must never be, wherever things stand. */
export const overPlates = (geometry: SheetGeometry): readonly string[] => {
  const plates = geometry.devices.flatMap((d) => d.plates.map((plate) => ({ id: d.id, rect: plate.rect })));
  return geometry.jackets.flatMap((jacket) => {
    if (jacket.noWay) return [];
    const length = pathLength(jacket.path);
    const points = Array.from({ length: Math.floor(length / 3) + 1 }, (_, i) => pathAt(jacket.path, i * 3));
    return plates
      .filter(({ rect }) =>
        points.some(
          (p) => p.x > rect.x + 1 && p.x < right(rect) - 1 && p.y > rect.y + 1 && p.y < bottom(rect) - 1,
        ),
      )
      .map(({ id }) => `${jacket.id} over ${id}`);
  });
};

/** Runs that are neither level nor upright, and first and last runs that don't leave along their mouths. */
export const crookedRuns = (geometry: SheetGeometry): readonly string[] =>
  geometry.jackets.flatMap((jacket) => {
    if (jacket.noWay) return [];
    const found = runsOf(jacket.id, jacket.polyline, 0)
      .filter((run) => run.from.x !== run.to.x && run.from.y !== run.to.y)
      .map((run) => `${jacket.id} runs aslant at ${run.from.x},${run.from.y}`);
    for (const end of ['a', 'b'] as const) {
      const ring = geometry.rings.find((r) =>
        r.groups.some((g) => g.jacket === jacket.id && g.end === end && (g.part ?? 0) === (jacket.part ?? 0)),
      )!;
      const [p, q] = end === 'a' ? jacket.polyline : [...jacket.polyline].reverse();
      // A branch begins at its trunk, not at the manifold's mouth.
      if (ring.manifold !== undefined && p!.x !== ring.groups[0]!.mouth.x) continue;
      const leaves =
        ring.side === 'left'
          ? q!.x < p!.x
          : ring.side === 'right'
            ? q!.x > p!.x
            : ring.side === 'top'
              ? q!.y < p!.y
              : q!.y > p!.y;
      if (!leaves) found.push(`${jacket.id} does not leave its mouth ${end} straight`);
    }
    return found;
  });

/** Jackets that miss their own transport's band, or lie too near to its edge while they run along it. */
export const outsideBand = (geometry: SheetGeometry): readonly string[] =>
  geometry.jackets.flatMap((jacket) => {
    const band = geometry.bands.find((b) => b.id === jacket.transport);
    if (jacket.noWay || band === undefined) return [];
    const rects = [...band.limbs, ...(band.header === undefined ? [] : [band.header])];
    const runs = runsOf(jacket.id, jacket.polyline, jacket.width / 2);
    if (!runs.some((run) => rects.some((rect) => overlap(groundOf(run), rect))))
      return [`${jacket.id} misses ${band.id}`];
    return runs
      .filter((run) => run.index > 0 && !run.last && !isLevel(run))
      .filter((run) => {
        const limb = band.limbs.find((r) => run.from.x > r.x && run.from.x < right(r));
        return (
          limb !== undefined &&
          (run.from.x - run.half < limb.x + 21 || run.from.x + run.half > right(limb) - 21)
        );
      })
      .map((run) => `${jacket.id} at ${run.from.x} too near to the edge of ${band.id}`);
  });

/** Corners tighter than the least radius; a short S has none. */
export const tightCorners = (geometry: SheetGeometry): readonly string[] =>
  geometry.jackets.flatMap((jacket) => {
    const least = leastRadius(Math.max(1, jacket.lanes.length), jacket.pitch);
    return jacket.path.flatMap((step) =>
      step.kind === 'arc' && step.radius < least - 0.51
        ? [`${jacket.id} turns at ${step.radius}, least ${least}`]
        : [],
    );
  });

/** Crossings that lie on a corner of either jacket, as a share of all. */
export const askewCrossings = (geometry: SheetGeometry): { readonly all: number; readonly askew: number } => {
  let all = 0;
  let askew = 0;
  for (const jacket of geometry.jackets)
    for (const crossing of jacket.crossings) {
      all += 1;
      const at = pathAt(crossing.path, pathLength(crossing.path) / 2);
      const under = geometry.jackets.find((j) => j.id === crossing.over)!;
      const angleAt = (j: JacketGeometry): number => {
        const length = pathLength(j.path);
        let best = 0;
        let distance = Infinity;
        for (let along = 0; along <= length; along += 1) {
          const p = pathAt(j.path, along);
          const d = Math.hypot(p.x - at.x, p.y - at.y);
          if (d < distance) {
            distance = d;
            best = p.angle;
          }
        }
        return best;
      };
      const between = Math.abs(Math.sin(angleAt(jacket) - angleAt(under)));
      if (between < 0.99) askew += 1;
    }
  return { all, askew };
};

/** Ends where the lanes of a jacket lie in another order than their ferrules: their tails would cross. */
export const twistedTails = (geometry: SheetGeometry): readonly string[] =>
  geometry.jackets.flatMap((jacket) => {
    if (jacket.noWay) return [];
    return (['a', 'b'] as const).flatMap((end) => {
      const tails = jacket.lanes
        .map((lane) => lane.tails[end])
        .map((tail) => ({ from: tail[0]!.to, to: tail.at(-1)!.to }));
      const ring = geometry.rings.find((r) =>
        r.groups.some((group) =>
          group.ferrules.some((f) => f.tunnel === jacket.lanes[0]?.tunnel && f.end === end),
        ),
      );
      const upright = ring?.side === 'top' || ring?.side === 'bottom';
      const axis = upright ? 'x' : 'y';
      const byFerrule = [...tails].sort((p, q) => p.from[axis] - q.from[axis]);
      const inOrder = byFerrule.every((t, i) => i === 0 || byFerrule[i - 1]!.to[axis] < t.to[axis]);
      return inOrder ? [] : [`${jacket.id} twists at ${end}`];
    });
  });

/** Frames outside the sheet or over each other, and bands over frames. */
export const misplacedFrames = (geometry: SheetGeometry): readonly string[] => {
  const found: string[] = [];
  geometry.sites.forEach((site, i) => {
    if (!inside(geometry.sheet.frame, site.rect)) found.push(`${site.id} leaves the sheet`);
    for (const other of geometry.sites.slice(i + 1))
      if (overlap(site.rect, other.rect)) found.push(`${site.id} over ${other.id}`);
    for (const band of geometry.bands)
      for (const rect of [...band.limbs, ...(band.header === undefined ? [] : [band.header])])
        if (overlap(site.rect, rect)) found.push(`${site.id} over ${band.id}`);
    for (const box of [geometry.sheet.titleBlock, geometry.sheet.legend])
      if (overlap(site.rect, box)) found.push(`${site.id} over the sheet's furniture`);
  });
  geometry.devices.forEach((device, i) => {
    for (const other of geometry.devices.slice(i + 1))
      if (overlap(device.rect, other.rect)) found.push(`${device.id} over ${other.id}`);
  });
  for (const device of geometry.devices) {
    const frame = geometry.sites.find((site) => inside(site.rect, device.rect));
    if (frame === undefined) found.push(`${device.id} stands in no frame`);
  }
  return found;
};

/** Pips of one plate's side nearer than their spacing. */
export const crampedPips = (geometry: SheetGeometry): readonly string[] =>
  geometry.devices.flatMap((device) =>
    device.pips.flatMap((pip, i) =>
      device.pips.slice(i + 1).flatMap((other) => {
        if (pip.side !== other.side || pip.member !== other.member) return [];
        const apart = Math.hypot(pip.at.x - other.at.x, pip.at.y - other.at.y);
        return apart < 15.99 ? [`${device.id}: ${pip.port} and ${other.port} ${apart} px apart`] : [];
      }),
    ),
  );

/** Cables that lie on top of each other for a stretch. */
export const coveredCables = (geometry: SheetGeometry): readonly string[] => {
  const runs = cableRuns(geometry);
  const found: string[] = [];
  runs.forEach((p, i) => {
    for (const q of runs.slice(i + 1)) {
      if (p.of === q.of || isLevel(p) !== isLevel(q)) continue;
      if (overlap(groundOf(p), groundOf(q), 0.5)) found.push(`${p.of} on ${q.of}`);
    }
  });
  return found;
};

/** Landings that miss their band. */
export const missedLandings = (geometry: SheetGeometry, design: Design): readonly string[] =>
  Object.entries(design.links).flatMap(([id, link]) => {
    if (link.kind !== 'landing') return [];
    const cables = geometry.cables.filter((cable) => cable.links.includes(id));
    if (cables.length === 0) return [`${id} is not drawn`];
    const band = geometry.bands.find((b) => b.id === link.transport)!;
    const rects = [...band.limbs, ...(band.header === undefined ? [] : [band.header])];
    return cables.flatMap((cable) =>
      cable.noWay || (cable.landing !== undefined && rects.some((rect) => inside(rect, cable.landing!.bar)))
        ? []
        : [`${id} ends outside ${link.transport}`],
    );
  });

/** Words that lie on plates, ferrules, cords, other words or off the sheet. */
export const coveredWords = (geometry: SheetGeometry): readonly string[] => {
  const words = [
    ...geometry.rings.map((ring) => ({ name: `address of ${ring.endpoint}`, rect: ring.label.rect })),
    ...geometry.cables.flatMap((c) =>
      c.label === undefined ? [] : [{ name: `address at ${c.links[0]}`, rect: c.label.rect }],
    ),
    ...geometry.bands.map((b) => ({ name: `words of ${b.id}`, rect: b.text.rect })),
    ...geometry.notes.map((n) => ({ name: `note ${n.id}`, rect: n.rect })),
  ];
  const solid = solidOf(geometry);
  const cords = jacketRuns(geometry).map((run) => ({ name: run.of, rect: groundOf(run, run.half) }));
  const found: string[] = [];
  words.forEach((word, i) => {
    if (!inside(geometry.sheet.frame, word.rect)) found.push(`${word.name} leaves the sheet`);
    for (const other of [...words.slice(i + 1), ...solid, ...cords])
      if (overlap(word.rect, other.rect, 0.5)) found.push(`${word.name} over ${other.name}`);
  });
  return found;
};

/** The design with every list the other way about: it says the same. */
export const reversed = (design: Design): Design => {
  const turn = (value: unknown, depth: number): unknown =>
    typeof value === 'object' && value !== null && !Array.isArray(value) && depth > 0
      ? Object.fromEntries(
          Object.entries(value)
            .reverse()
            .map(([key, inner]) => [key, turn(inner, depth - 1)]),
        )
      : value;
  return turn(design, 4) as Design;
};
