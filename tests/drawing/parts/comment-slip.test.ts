import { expect, it } from 'vitest';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { noDecorations, type Decorations } from '#drawing/decorations.ts';
import { placedBalloons } from '#drawing/parts/balloon-part.ts';
import { commentSlips } from '#drawing/parts/comment-slip.ts';
import { drawingFacts } from '#drawing/parts/drawing-facts.ts';
import { route } from '#drawing/routing/route.ts';
import type { Shape } from '#drawing/shape.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { partVisibility, visibleDecorations } from '#drawing/view-layers.ts';
import { terminalsStretch } from '../../../seeds/demo-designs/terminals-stretch.ts';
import { allShapes } from './sample-geometry.ts';

const bare = terminalsStretch('Terminals stretch', 'SMF-L2-004');
const design = applyPatch(bare, tidy(bare));
const geometry = route(design);
const facts = drawingFacts(design, new Map());
const devices = Object.keys(design.devices).map((id) => ({ collection: 'devices' as const, id }));
const [device] = devices as [(typeof devices)[0]];

const drawn = (decorations: Partial<Decorations>): readonly Shape[] =>
  commentSlips(geometry, facts, { level: 'near', decorations: { ...noDecorations, ...decorations } });
const part = (slip: Shape, key: string): Shape => allShapes(slip).find((shape) => shape.key === key)!;
const countOf = (slip: Shape): unknown => JSON.stringify(part(slip, 'count'));

it('open threads stand beside their element as one slip with their number, solid where a change is suggested', () => {
  const [plain] = drawn({ flags: [{ at: device, count: 3, suggests: false }] });
  const [solid] = drawn({ flags: [{ at: device, count: 1, suggests: true }] });
  expect(countOf(plain!)).toContain('"3"');
  expect(countOf(solid!)).toContain('"±1"');
  expect(part(plain!, 'paper').attrs['fill']).not.toEqual(part(solid!, 'paper').attrs['fill']);
  // The folded corner tells it from every balloon without its colour.
  expect(part(plain!, 'fold')).toBeDefined();
});

it('what has no place on the sheet has no slip', () => {
  expect(drawn({ flags: [{ at: { collection: 'demands', id: 'x' }, count: 1, suggests: false }] })).toEqual(
    [],
  );
  expect(drawn({})).toEqual([]);
});

it('slips keep off balloons and one another', () => {
  const balloons = devices.map((at, i) => ({
    number: i + 1,
    severity: 'blocking' as const,
    waived: false,
    at,
  }));
  const decorations = {
    ...noDecorations,
    balloons,
    flags: devices.map((at) => ({ at, count: 1, suggests: false })),
  };
  const corner = (slip: Shape): readonly [number, number] => {
    const [, x, y] = /^M([-\d.]+) ([-\d.]+)/.exec(String(part(slip, 'paper').attrs['d']))!;
    return [Number(x) + 13, Number(y) + 10.5];
  };
  const centres = [
    ...placedBalloons(geometry, facts, { level: 'near', decorations }).map(
      ({ centre }) => [centre.x, centre.y] as const,
    ),
    ...drawn(decorations).map(corner),
  ];
  expect(centres).toHaveLength(2 * devices.length);
  const nearest = centres.flatMap(([x, y], i) =>
    centres.slice(i + 1).map(([u, v]) => Math.max(Math.abs(x - u), Math.abs(y - v))),
  );
  expect(Math.min(...nearest)).toBeGreaterThan(20);
});

it('a view shows the slips of what it shows', () => {
  const [link] = Object.keys(design.links) as [string];
  const cable = { collection: 'links' as const, id: link };
  const flags = [device, cable].map((at) => ({ at, count: 1, suggests: false }));
  const visibilityOf = partVisibility(design, new Map(), { layers: ['overlay'] });
  const shown = visibleDecorations({ ...noDecorations, flags }, visibilityOf).flags?.map(({ at }) => at);
  expect(shown).not.toContainEqual(cable);
  expect(shown).toEqual([device, cable].filter((at) => visibilityOf(at) === 'shown'));
});
