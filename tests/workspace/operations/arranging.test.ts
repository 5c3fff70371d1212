import { describe, expect, it } from 'vitest';
import { boxesOf } from '../../../src/canvas/boxes-of.ts';
import { standingOf } from '../../../src/canvas/flow-changes-to-patch.ts';
import type { Rect } from '../../../src/drawing/geometry.ts';
import { route } from '../../../src/drawing/routing/route.ts';
import { tidy } from '../../../src/drawing/tidy/tidy.ts';
import type { Design, ElementRef } from '../../../src/engine/model/design.ts';
import { applyPatch, inversePatch } from '../../../src/engine/model/merge-patch.ts';
import { parseDesign } from '../../../src/engine/model/parse-design.ts';
import {
  alignElements,
  alignments,
  distributeElements,
} from '../../../src/workspace/operations/align-parts.ts';
import { setCollapsed } from '../../../src/workspace/operations/collapse-sites.ts';
import { moveElements, rehome, setLocked } from '../../../src/workspace/operations/move-parts.ts';
import type { Operation } from '../../../src/workspace/operations/operation.ts';
import { pinNote, placeDevice } from '../../../src/workspace/operations/place-parts.ts';
import { gridPx, snapMove } from '../../../src/workspace/operations/snap-move.ts';
import { hubDesign } from '../../support/designs.ts';

const plan = hubDesign(3, { hub: 'ha-pair', segments: ['a', 'b'] });
const design = applyPatch(plan, tidy(plan));
const device = (id: string): ElementRef => ({ collection: 'devices', id });
const hosts = ['h-s1-a', 'h-s1-b', 'sw-s1'].map(device);

const boxes = (of: Design, refs: readonly ElementRef[]) => boxesOf(route(of), refs);
const rectOf = (of: Design, ref: ElementRef): Rect => boxes(of, [ref])[0]!.rect;
const align = (
  of: Design,
  refs: readonly ElementRef[],
  how: Parameters<typeof alignElements>[3],
): Operation => alignElements(of, standingOf(route(of)), boxes(of, refs), how);
const distribute = (of: Design, refs: readonly ElementRef[], way: 'across' | 'down'): Operation =>
  distributeElements(of, standingOf(route(of)), boxes(of, refs), way);
const done = (of: Design, operation: Operation): Design => {
  if (!operation.ok) throw new Error(operation.why);
  const after = applyPatch(of, operation.patch);
  expect(parseDesign(after)).toMatchObject({ ok: true });
  // One patch back is all that undoing takes.
  expect(applyPatch(after, inversePatch(of, operation.patch))).toEqual(of);
  return after;
};
const why = (operation: Operation): string => (operation.ok ? '' : operation.why);
const lock = (of: Design, ref: ElementRef): Design =>
  done(of, setLocked(of, standingOf(route(of)), [ref], true));

const lineOf: { readonly [A in (typeof alignments)[number]]: (rect: Rect) => number } = {
  left: (rect) => rect.x,
  centre: (rect) => rect.x + rect.width / 2,
  right: (rect) => rect.x + rect.width,
  top: (rect) => rect.y,
  middle: (rect) => rect.y + rect.height / 2,
  bottom: (rect) => rect.y + rect.height,
};

describe('aligning', () => {
  it.each(alignments)('brings the %s of all into one line', (alignment) => {
    const after = done(design, align(design, hosts, alignment));
    const lines = hosts.map((ref) => lineOf[alignment](rectOf(after, ref)));
    for (const line of lines) expect(Math.abs(line - lines[0]!)).toBeLessThanOrEqual(0.5);
  });

  it('goes to the outermost edge of them all', () => {
    const least = Math.min(...hosts.map((ref) => rectOf(design, ref).x));
    const after = done(design, align(design, hosts, 'left'));
    expect(rectOf(after, hosts[0]!).x).toBe(least);
  });

  it('comes to what is locked', () => {
    const held = lock(design, device('sw-s1'));
    const after = done(held, align(held, hosts, 'top'));
    expect(rectOf(after, device('sw-s1'))).toEqual(rectOf(held, device('sw-s1')));
    expect(rectOf(after, device('h-s1-a')).y).toBe(rectOf(held, device('sw-s1')).y);
  });

  it('takes the devices of a site along', () => {
    const sites: readonly ElementRef[] = [
      { collection: 'sites', id: 's1' },
      { collection: 'sites', id: 's2' },
    ];
    const before = rectOf(design, sites[0]!);
    const after = done(design, align(design, [...sites, device('fw-s1')], 'bottom'));
    const dy = rectOf(after, sites[0]!).y - before.y;
    expect(rectOf(after, device('fw-s1')).y - rectOf(design, device('fw-s1')).y).toBe(dy);
  });

  it('says what is missing', () => {
    expect(why(align(design, [device('fw-s1')], 'left'))).toMatch(/select two or more/);
    const held = lock(lock(design, device('h-s1-a')), device('sw-s1'));
    expect(why(align(held, [device('h-s1-a'), device('sw-s1')], 'left'))).toMatch(/All of these are locked/);
  });
});

describe('spacing out evenly', () => {
  it.each(['across', 'down'] as const)('leaves equal gaps %s between the outermost two', (way) => {
    const refs = Object.keys(design.devices).slice(0, 6).map(device);
    const after = done(design, distribute(design, refs, way));
    const from = way === 'across' ? lineOf.left : lineOf.top;
    const to = way === 'across' ? lineOf.right : lineOf.bottom;
    const before = refs
      .map((ref) => ({ id: ref.id, ...rectOf(design, ref) }))
      .sort((a, b) => from(a) - from(b) || (a.id < b.id ? -1 : 1));
    // At the sizes they had: a plate may grow where its cables come in on another side.
    const rects = before.map((rect) => ({ ...rect, ...after.layout.devices![rect.id] }));
    const gaps = rects.slice(1).map((rect, i) => from(rect) - to(rects[i]!));
    for (const gap of gaps) expect(Math.abs(gap - gaps[0]!)).toBeLessThanOrEqual(1);
    expect(from(rects[0]!)).toBe(from(before[0]!));
    expect(from(rects.at(-1)!)).toBe(from(before.at(-1)!));
  });

  it('says which locked one is in the way, and that two are too few', () => {
    const middle = [...hosts].sort((a, b) => rectOf(design, a).x - rectOf(design, b).x)[1]!;
    const held = lock(design, middle);
    expect(why(distribute(held, hosts, 'across'))).toContain(design.devices[middle.id]!.name);
    expect(why(distribute(design, hosts.slice(0, 2), 'down'))).toMatch(/three elements or more/);
  });
});

describe('snapping while dragging', () => {
  const moving = { x: 100, y: 100, width: 40, height: 20 };
  const other = { x: 300, y: 203, width: 60, height: 40 };

  it('lines up with a neighbour within reach and shows the line through both', () => {
    const snapped = snapMove(moving, [other], 9, 105, 6);
    expect(snapped.dy).toBe(103);
    expect(snapped.guides).toContainEqual({ from: { x: 100, y: 203 }, to: { x: 372, y: 203 } });
  });

  it('lines centres up as well as edges', () => {
    const snapped = snapMove(moving, [other], 211, 0, 6);
    expect(snapped.dx).toBe(210);
    expect(snapped.guides.some(({ from }) => from.x === 330)).toBe(true);
  });

  it('goes to the grid where nothing is within reach, without a line', () => {
    const snapped = snapMove(moving, [other], 13, 3, 6);
    expect((moving.x + snapped.dx) % gridPx).toBe(0);
    expect((moving.y + snapped.dy) % gridPx).toBe(0);
    expect(Math.abs(snapped.dx - 13)).toBeLessThanOrEqual(gridPx / 2);
    expect(snapped.guides).toEqual([]);
  });

  it('prefers the nearer of two neighbours that fit as well', () => {
    const near = { x: 160, y: 97, width: 30, height: 20 };
    const far = { x: 900, y: 103, width: 30, height: 20 };
    expect(snapMove(moving, [far, near], 0, 0, 6).dy).toBe(-3);
  });
});

describe('moving', () => {
  const standing = standingOf(route(design));
  const noted = (target?: ElementRef): Design =>
    applyPatch(design, {
      notes: { n: { text: 'Mind the tide', ...(target === undefined ? {} : { target }) } },
      layout: { notes: { n: { x: 10, y: 10 } } },
    } as never);

  it.each([
    ['a device that it is pinned to', device('fw-s1'), [device('fw-s1')]],
    ['the site of that device', device('fw-s1'), [{ collection: 'sites', id: 's1' }]],
    ['the site itself', { collection: 'sites', id: 's1' }, [{ collection: 'sites', id: 's1' }]],
  ] as const)('takes a note along with %s', (_what, target, moved) => {
    const before = noted(target as ElementRef);
    const after = done(
      before,
      moveElements(before, standingOf(route(before)), moved as readonly ElementRef[], 30, -8),
    );
    expect(after.layout.notes!['n']).toEqual({ x: 40, y: 2 });
  });

  it('takes along what is written in a site’s frame, and leaves a note about a cable of which one end stays', () => {
    const frame = standing.sites['s1']!;
    const before = applyPatch(noted(), { layout: { notes: { n: { x: frame.x + 9, y: frame.y + 9 } } } });
    const seen = standingOf(route(before));
    const after = done(before, moveElements(before, seen, [{ collection: 'sites', id: 's1' }], 16, 0));
    expect(after.layout.notes!['n']!.x).toBe(frame.x + 25);
    const [cable] = Object.entries(design.links).find(
      ([, link]) => link.kind === 'cable' && link.a.device !== link.b.device,
    )!;
    const link = design.links[cable]!;
    const about = noted({ collection: 'links', id: cable });
    const one = device(link.kind === 'cable' ? link.a.device : '');
    expect(
      done(about, moveElements(about, standingOf(route(about)), [one], 16, 0)).layout.notes!['n']!.x,
    ).toBe(10);
  });

  it('leaves a locked device where it is when its site goes', () => {
    const held = lock(design, device('h-s1-a'));
    const after = done(held, moveElements(held, standing, [{ collection: 'sites', id: 's1' }], 24, 0));
    expect(after.layout.devices!['h-s1-a']).toEqual(held.layout.devices!['h-s1-a']);
    expect(after.layout.devices!['fw-s1']!.x).toBe(held.layout.devices!['fw-s1']!.x + 24);
  });
});

describe('collapsing a site', () => {
  const standing = standingOf(route(design));

  it('is one step there and one back, and writes down where everything comes out', () => {
    const unplaced = applyPatch(design, { layout: { devices: null, sites: null } });
    const before = standingOf(route(unplaced));
    const closed = done(unplaced, setCollapsed(unplaced, before, ['s1'], true));
    expect(closed.layout.sites!['s1']!.collapsed).toBe(true);
    const opened = done(closed, setCollapsed(closed, standingOf(route(closed)), ['s1'], false));
    expect(standingOf(route(opened)).devices['h-s1-a']).toEqual(before.devices['h-s1-a']);
  });

  it('moves as one, with what it keeps back', () => {
    const closed = done(design, setCollapsed(design, standing, ['s1'], true));
    const moved = done(
      closed,
      moveElements(closed, standingOf(route(closed)), [{ collection: 'sites', id: 's1' }], 40, 16),
    );
    for (const id of ['fw-s1', 'h-s1-a', 'sw-s1'])
      expect(moved.layout.devices![id]!.x).toBe(design.layout.devices![id]!.x + 40);
  });

  it('opens again for what is put into it', () => {
    const closed = done(design, setCollapsed(design, standing, ['s1'], true));
    const at = { x: 700, y: 100 };
    expect(
      done(
        closed,
        placeDevice(closed, 'host', at, 's1', () => 'h-new'),
      ).layout.sites!['s1']!.collapsed,
    ).toBe(undefined);
    expect(applyPatch(closed, rehome(closed, 'h-s2-a', 's1')).layout.sites!['s1']!.collapsed).toBe(undefined);
  });

  it('says why an empty site stays as it is', () => {
    const empty = applyPatch(design, {
      sites: { s9: { name: 'Quay' } },
      layout: { sites: { s9: { x: 10, y: 10, width: 200, height: 100 } } },
    });
    expect(why(setCollapsed(empty, standingOf(route(empty)), ['s9'], true))).toMatch(/nothing to keep back/);
    expect(why(setCollapsed(design, standing, ['gone'], true))).toMatch(/no longer there/);
  });
});

describe('a note', () => {
  it('is pinned to what it is put on, to the device of a port, and stands beside it', () => {
    const pinned = done(
      design,
      pinNote(design, { ...device('fw-s1'), port: 'wan1' }, () => 'note-1'),
    );
    expect(pinned.notes['note-1']).toEqual({
      text: 'Note',
      target: { collection: 'devices', id: 'fw-s1' },
    });
    const note = route(pinned).notes.find(({ id }) => id === 'note-1')!;
    const plate = rectOf(pinned, device('fw-s1'));
    expect(Math.hypot(note.at.x - plate.x, note.at.y - plate.y)).toBeLessThan(600);
  });

  it('is not pinned to what is gone or takes none', () => {
    expect(why(pinNote(design, device('gone'), () => 'n'))).toMatch(/No note can be pinned/);
    expect(why(pinNote(design, { collection: 'notes', id: 'n' }, () => 'n'))).toMatch(
      /No note can be pinned/,
    );
  });
});
