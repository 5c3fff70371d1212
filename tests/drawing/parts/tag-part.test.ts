import { describe, expect, it } from 'vitest';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { noDecorations, type Decorations } from '#drawing/decorations.ts';
import type { Rect } from '#drawing/geometry.ts';
import { drawingFacts } from '#drawing/parts/drawing-facts.ts';
import { placedBalloons } from '#drawing/parts/balloon-part.ts';
import { siteNameBoxes } from '#drawing/parts/site-part.ts';
import { tagParts } from '#drawing/parts/tag-part.ts';
import { route } from '#drawing/routing/route.ts';
import type { Shape } from '#drawing/shape.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { terminalsStretch } from '../../../seeds/demo-designs/terminals-stretch.ts';
import { allShapes } from './sample-geometry.ts';

const bare = terminalsStretch('Terminals stretch', 'SMF-L2-004');
const design = applyPatch(bare, tidy(bare));
const geometry = route(design);
const facts = drawingFacts(design, new Map());

const drawn = (tags: NonNullable<Decorations['tags']>): readonly Shape[] =>
  tagParts(geometry, facts, { level: 'near', decorations: { ...noDecorations, tags } });
const part = (tag: Shape, key: string): Shape | undefined =>
  allShapes(tag).find((shape) => shape.key === key);
const plateOf = (tag: Shape): Rect => {
  const { x, y, width, height } = part(tag, 'plate')!.attrs;
  return { x: Number(x), y: Number(y), width: Number(width), height: Number(height) };
};
const overlap = (a: Rect, b: Rect): boolean =>
  a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height;

const landing = { collection: 'links', id: 'ld-ho-coast' } as const;

it('neither a tag nor a balloon covers a site’s name, however large that is from afar', () => {
  const look = {
    level: 'far' as const,
    decorations: {
      ...noDecorations,
      tags: [{ at: landing, text: '7 %', fillPerMillion: 70_000 }],
      balloons: Object.keys(design.devices).map((id, i) => ({
        number: i + 1,
        severity: 'blocking' as const,
        waived: false,
        at: { collection: 'devices' as const, id },
      })),
    },
  };
  const names = siteNameBoxes(geometry, facts, look).map(({ box }) => box);
  expect(names.map(({ height }) => height > 36)).toEqual(names.map(() => true));
  const covered = [
    ...tagParts(geometry, facts, look).map(plateOf),
    ...placedBalloons(geometry, facts, look).map(({ centre: { x, y } }) => ({
      x: x - 12,
      y: y - 12,
      width: 24,
      height: 24,
    })),
  ].filter((box) => names.some((name) => overlap(name, box)));
  expect(covered).toEqual([]);
});

describe('tags beside elements', () => {
  it('cover no device, no name of a transport and not one another', () => {
    const tags = ['ld-ho-coast', 'ld-gul-coast', 'cb-ho-up1', 'cb-orr-up1'].map((id, i) => ({
      at: { collection: 'links' as const, id },
      text: `${i + 1}0 %`,
      fillPerMillion: 100_000 * (i + 1),
    }));
    const plates = drawn([...tags, { at: { collection: 'devices', id: 'fw-ho' }, text: '94 %' }]).map(
      plateOf,
    );
    expect(plates).toHaveLength(5);
    const solid = [
      ...geometry.devices.flatMap((device) => device.plates.map(({ rect }) => rect)),
      ...geometry.bands.map((band) => band.text.rect),
    ];
    plates.forEach((plate, i) => {
      expect([...solid, ...plates.slice(i + 1)].filter((other) => overlap(plate, other))).toEqual([]);
    });
  });

  it('are as long in the bar as the share, and stick out of it when more is asked than there is', () => {
    const [half] = drawn([{ at: landing, text: '50 %', fillPerMillion: 500_000 }]);
    const pipePx = Number(part(half!, 'pipe')!.attrs['width']);
    expect(Number(part(half!, 'fill')!.attrs['width'])).toBeCloseTo(pipePx / 2);
    expect(part(half!, 'over')).toBeUndefined();
    const [over] = drawn([{ at: landing, text: '120 %', fillPerMillion: 1_200_000 }]);
    expect(Number(part(over!, 'fill')!.attrs['width'])).toBeCloseTo(
      Number(part(over!, 'pipe')!.attrs['width']),
    );
    expect(part(over!, 'over')).toBeDefined();
  });

  it('are left out for what has no place on the sheet', () => {
    expect(drawn([{ at: { collection: 'demands', id: 'dm-cctv' }, text: '6 Mbit/s' }])).toEqual([]);
  });
});
