import { describe, expect, it } from 'vitest';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { noDecorations } from '#drawing/decorations.ts';
import type { Decorations } from '#drawing/decorations.ts';
import type { Point, Rect } from '#drawing/geometry.ts';
import { balloonParts } from '#drawing/parts/balloon-part.ts';
import { crowdedWords } from '#drawing/parts/crowded-words.ts';
import { drawingFacts } from '#drawing/parts/drawing-facts.ts';
import { ghostBoxes, ghostParts } from '#drawing/parts/ghost-part.ts';
import { overhangCallouts } from '#drawing/parts/overhang-part.ts';
import { route } from '#drawing/routing/route.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { terminalsStretch } from '../../../seeds/demo-designs/terminals-stretch.ts';
import { allShapes } from './sample-geometry.ts';

const bare = terminalsStretch('Terminals stretch', 'SMF-L2-004');
const design = applyPatch(bare, tidy(bare));
const geometry = route(design);
const facts = drawingFacts(design, new Map());
const look = (decorations: Partial<Decorations>) =>
  ({ level: 'near', decorations: { ...noDecorations, ...decorations } }) as const;

const overlap = (a: Rect, b: Rect): boolean =>
  a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height;
const plates = geometry.devices.flatMap((device) => device.plates.map((plate) => plate.rect));
const words = [
  ...geometry.rings.map((ring) => ring.label.rect),
  ...geometry.cables.flatMap((cable) => (cable.label === undefined ? [] : [cable.label.rect])),
  ...geometry.bands.map((band) => band.text.rect),
  ...geometry.notes.map((note) => note.rect),
];

const balloon = (number: number, collection: 'tunnels' | 'associations' | 'devices', id: string) =>
  ({ number, severity: 'blocking', waived: false, at: { collection, id }, words: 'VNIs differ' }) as const;

/** Where the dots of balloons lie, by number. */
const dots = (decorations: Partial<Decorations>): ReadonlyMap<number, Point> =>
  new Map(
    balloonParts(geometry, facts, look(decorations)).map((part) => {
      const dot = allShapes(part).find(({ key }) => key === 'dot')!;
      return [
        Number(part.key!.replace('balloon-', '')),
        { x: Number(dot.attrs['cx']), y: Number(dot.attrs['cy']) },
      ];
    }),
  );
const apart = (a: Point, b: Point): number => Math.hypot(a.x - b.x, a.y - b.y);

describe('a pipe with a packet that is too large', () => {
  const overhangs = [
    { tunnel: 'tn-ho-gul-b', end: 'a', packetBytes: 1604, mtuBytes: 1500, balloon: 2 },
    { tunnel: 'tn-ho-orr-b', end: 'a', packetBytes: 1604, mtuBytes: 1500 },
  ] as const;

  it('stands clear of plates, words, cords and other pipes', () => {
    const boxes = overhangCallouts(geometry, look({ overhangs })).map(({ box }) => box);
    expect(boxes).toHaveLength(2);
    expect(overlap(boxes[0]!, boxes[1]!)).toBe(false);
    for (const box of boxes) {
      for (const rect of [...plates, ...words]) expect(overlap(box, rect)).toBe(false);
      expect(box.x).toBeGreaterThan(geometry.sheet.frame.x);
    }
  });
  it('is what its own balloon points at', () => {
    const [{ box }] = overhangCallouts(geometry, look({ overhangs })) as [{ box: Rect }];
    const at = dots({ overhangs, balloons: [balloon(2, 'tunnels', 'tn-ho-gul-b')] }).get(2)!;
    expect(overlap({ x: at.x - 1, y: at.y - 1, width: 2, height: 2 }, box)).toBe(true);
  });
});

describe('balloons', () => {
  it('of one jacket are spread along it', () => {
    const at = dots({
      balloons: [
        balloon(1, 'tunnels', 'tn-ho-gul-b'),
        balloon(2, 'associations', 'as-ho-gul'),
        balloon(3, 'tunnels', 'tn-ho-gul-a'),
      ],
    });
    expect(apart(at.get(1)!, at.get(2)!)).toBeGreaterThan(30);
    expect(apart(at.get(2)!, at.get(3)!)).toBeGreaterThan(30);
  });
  it('of one device point at it side by side', () => {
    const at = dots({ balloons: [balloon(1, 'devices', 'fw-gul'), balloon(2, 'devices', 'fw-gul')] });
    expect(apart(at.get(1)!, at.get(2)!)).toBeGreaterThan(15);
  });
  it('point into the gap of their own cut, and beside that of another', () => {
    const cuts = [{ tunnel: 'tn-ho-gul-b', vnis: { a: 10_120, b: 10_210 }, balloon: 1 }];
    const at = dots({
      cuts,
      balloons: [balloon(1, 'tunnels', 'tn-ho-gul-b'), balloon(2, 'tunnels', 'tn-ho-gul-b')],
    });
    const alone = dots({ balloons: [balloon(1, 'tunnels', 'tn-ho-gul-b')] });
    expect(at.get(1)).toEqual(alone.get(1));
    expect(apart(at.get(1)!, at.get(2)!)).toBeGreaterThan(60);
  });
});

describe('a ghost', () => {
  it('begins beside a port that is cabled, so that it does not hide the cable', () => {
    const ghosts = [
      {
        id: 'g',
        from: { device: 'vms-1', port: 'p1' },
        to: { device: 'fw-ho', port: 'lan2', member: 1 as const },
        label: 'port 3 of fw-ho-1',
      },
    ];
    const from = allShapes(ghostParts(geometry, look({ ghosts }))[0]!).find(({ key }) => key === 'from')!;
    const pip = geometry.devices.find(({ id }) => id === 'vms-1')!.pips.find(({ port }) => port === 'p1')!;
    expect(pip.cabled).toBe(true);
    expect(apart(pip.at, { x: Number(from.attrs['cx']), y: Number(from.attrs['cy']) })).toBe(14);
    const boxes = ghostBoxes(geometry, look({ ghosts }));
    expect(boxes).toHaveLength(2);
    for (const rect of plates) expect(overlap(boxes[1]!, rect)).toBe(false);
  });
});

describe('what found no room', () => {
  it('is said by name, with what helps', () => {
    expect(crowdedWords({ what: 'overlap', ids: ['as-ho-gul', 'as-ho-orr'] }, facts)).toBe(
      'as-ho-gul and as-ho-orr lie on top of each other: move their sites apart or widen the band.',
    );
    expect(crowdedWords({ what: 'text', ids: ['coast'] }, facts)).toBe(
      'No free place for the words of Coastal access: make room beside it.',
    );
  });
  it('is a sheet too, once sites lie outside the largest', () => {
    const far = applyPatch(design, {
      layout: { sheet: 'A0', sites: { gul: { x: 5000 } }, devices: { 'fw-gul': { x: 5100 } } },
    });
    const entry = route(far).crowded.find(({ what }) => what === 'sheet')!;
    expect(entry.ids).toEqual(['gul']);
    expect(crowdedWords(entry, facts)).toBe(
      'Larger than A0: Gullhaven lies outside the sheet. Collapse sites or split the design.',
    );
  });
  it('is no sheet while all sites lie on it', () => {
    const large = applyPatch(design, { layout: { sheet: 'A0' } });
    expect(route(large).crowded.filter(({ what }) => what === 'sheet')).toEqual([]);
  });
});
