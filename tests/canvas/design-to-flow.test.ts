import { describe, expect, it } from 'vitest';
import { designToFlow, pipHandle, readPipHandle } from '../../src/canvas/design-to-flow.ts';
import {
  dockingSide,
  dragOf,
  dropToPatch,
  movesIn,
  nearestSide,
  siteAt,
  snapDrag,
  standingOf,
} from '../../src/canvas/flow-changes-to-patch.ts';
import { pinNoteBeside } from '../../src/canvas/place-note.ts';
import { endAt, freePlace, placePart } from '../../src/canvas/place-part.ts';
import { refOfKey } from '../../src/canvas/ref-at.ts';
import { elementKey } from '../../src/drawing/decorations.ts';
import { drawingFacts } from '../../src/drawing/parts/drawing-facts.ts';
import { anchorOf } from '../../src/drawing/routing/anchors.ts';
import { route } from '../../src/drawing/routing/route.ts';
import { tidy } from '../../src/drawing/tidy/tidy.ts';
import { tunnelSegments } from '../../src/engine/flood/tunnel-segments.ts';
import type { Design } from '../../src/engine/model/design.ts';
import { applyPatch } from '../../src/engine/model/merge-patch.ts';
import { parseDesign } from '../../src/engine/model/parse-design.ts';
import { indexNetwork } from '../../src/engine/network/index-network.ts';
import { isLocked, moveElements } from '../../src/workspace/operations/move-parts.ts';
import { hubDesign } from '../support/designs.ts';

const plan = hubDesign(3, { hub: 'ha-pair', segments: ['a', 'b'] });
const design = applyPatch(plan, tidy(plan));
const geometry = route(design);
const flowOf = (of: Design, selected: readonly string[] = []) =>
  designToFlow({
    design: of,
    geometry: route(of),
    facts: drawingFacts(of, tunnelSegments(indexNetwork(of))),
    selected: new Set(selected),
    editable: true,
    isLocked: (ref) => isLocked(of, ref),
  });

describe('the design as the canvas shows it', () => {
  const { nodes, edges } = flowOf(design, ['devices/fw-s0']);

  it('has a node for every site, transport, device and ring', () => {
    for (const collection of ['sites', 'transports', 'devices', 'endpoints'] as const)
      for (const id of Object.keys(design[collection]))
        expect(
          nodes.some((node) => node.id === `${collection}/${id}`),
          id,
        ).toBe(true);
    expect(new Set(nodes.map((node) => node.id)).size).toBe(nodes.length);
  });

  it('has an edge for every association, tunnel and cable, between nodes that exist', () => {
    const ids = new Set(nodes.map((node) => node.id));
    for (const edge of edges) expect(ids.has(edge.source) && ids.has(edge.target), edge.id).toBe(true);
    for (const id of Object.keys(design.tunnels))
      expect(edges.some((edge) => edge.id === `tunnels/${id}`)).toBe(true);
    for (const id of Object.keys(design.associations))
      expect(edges.some((edge) => edge.data!.ref!.id === id)).toBe(true);
    expect(new Set(edges.map((edge) => edge.id)).size).toBe(edges.length);
  });

  it('brings sizes and handles along, so that nothing has to be measured', () => {
    for (const node of nodes) expect(node.width! > 0 && node.height! > 0, node.id).toBe(true);
    const wall = nodes.find((node) => node.id === 'devices/fw-s1')!;
    expect(wall.handles!.map((handle) => handle.id)).toEqual(
      expect.arrayContaining(['body', 'port:wan1', 'port:lan1']),
    );
  });

  it('marks what is selected and says what everything is', () => {
    expect(nodes.filter((node) => node.selected).map((node) => node.id)).toEqual(['devices/fw-s0']);
    expect(nodes.find((node) => node.id === 'devices/fw-s0')!.ariaLabel).toBe('HA pair fw-s0');
  });

  it('names pips so that they can be read back', () => {
    expect(readPipHandle(pipHandle({ port: 'lan.1', member: 2 }))).toEqual({ port: 'lan.1', member: 2 });
    expect(readPipHandle('body')).toBeUndefined();
  });

  it('reads an element back from its key', () => {
    for (const ref of [
      { collection: 'tunnels', id: 'tn-a.b' },
      { collection: 'devices', id: 'fw', port: 'lan1', member: 2 },
      { collection: 'devices', id: 'fw', port: 'lan1' },
    ] as const)
      expect(refOfKey(elementKey(ref))).toEqual(ref);
    expect(refOfKey('nonsense/x')).toBeUndefined();
  });
});

describe('what moving nodes means for the design', () => {
  const { nodes } = flowOf(design);
  const held = (id: string, dx: number, dy: number) => {
    const node = nodes.find((candidate) => candidate.id === id)!;
    return { id, position: { x: node.position.x + dx, y: node.position.y + dy } };
  };

  const moveBy = (moved: Parameters<typeof dragOf>[1]) => {
    const { refs, dx, dy } = dragOf(nodes, moved)!;
    const operation = moveElements(design, standingOf(geometry), refs, dx, dy);
    return operation.ok ? operation.patch : {};
  };

  it('is one patch on the layout', () => {
    const patch = moveBy([held('devices/h-s1-a', 30, -12)]);
    const before = standingOf(geometry).devices['h-s1-a']!;
    expect(patch).toEqual({ layout: { devices: { 'h-s1-a': { x: before.x + 30, y: before.y - 12 } } } });
  });

  it('takes a site with all that stands in it', () => {
    const patch = moveBy([held('sites/s1', 10, 10)]);
    expect(Object.keys((patch.layout as { devices: object }).devices).sort()).toEqual([
      'fw-s1',
      'h-s1-a',
      'h-s1-b',
      'sw-s1',
    ]);
  });

  it('lines a device up with its neighbours, a site with other sites, and leaves what they are alone', () => {
    const rectOf = (id: string) => geometry.devices.find((each) => each.id === id)!.rect;
    const [mine, theirs] = [rectOf('h-s1-a'), rectOf('sw-s2')];
    const drag = dragOf(nodes, [held('devices/h-s1-a', theirs.x - mine.x + 3, theirs.y - mine.y - 90)])!;
    const snapped = snapDrag(design, geometry, drag, 6);
    expect(Math.abs(snapped.dx - drag.dx)).toBeLessThanOrEqual(6);
    expect(snapped.guides.length).toBeGreaterThan(0);
    const [here, there] = ['s1', 's2'].map((id) => geometry.sites.find((site) => site.id === id)!.rect);
    const siteDrag = dragOf(nodes, [held('sites/s1', 0, there!.y - here!.y + 4)])!;
    expect(snapDrag(design, geometry, siteDrag, 6).dy).toBeCloseTo(there!.y - here!.y, 1);
    expect(snapDrag(design, geometry, { refs: [], dx: 3, dy: 4 }, 6)).toEqual({ dx: 3, dy: 4, guides: [] });
  });

  it('docks a ring on the side of its device that it is let go beside', () => {
    const plate = geometry.devices.find((candidate) => candidate.id === 'fw-s1')!.rect;
    const ring = geometry.rings.find((candidate) => candidate.endpoint === 'lo-s1')!;
    const middle = plate.y + plate.height / 2;
    const beside = { left: plate.x - 30, right: plate.x + plate.width + 30 };
    const [own, other] = ring.side === 'left' ? (['left', 'right'] as const) : (['right', 'left'] as const);
    expect(dockingSide(geometry, 'lo-s1', { x: beside[other], y: middle })).toBe(other);
    expect(dockingSide(geometry, 'lo-s1', { x: beside[own], y: middle })).toBeUndefined();
    expect(dockingSide(geometry, 'lo-s1', { x: plate.x - 300, y: middle })).toBeUndefined();
    expect(nearestSide({ x: 0, y: 0, width: 100, height: 50 }, { x: 50, y: -40 })).toBe('top');
    expect(nearestSide({ x: 0, y: 0, width: 100, height: 50 }, { x: 50, y: 90 })).toBe('bottom');
  });

  it('puts a device into the site it is dropped in', () => {
    const other = geometry.sites.find((site) => site.id === 's2')!.rect;
    const from = standingOf(geometry).devices['h-s1-a']!;
    const move = moveBy([held('devices/h-s1-a', other.x + 40 - from.x, other.y + 40 - from.y)]);
    const after = applyPatch(
      design,
      dropToPatch(design, geometry, move, [{ collection: 'devices', id: 'h-s1-a' }]),
    );
    expect(after.devices['h-s1-a']!.site).toBe('s2');
    expect(parseDesign(after).ok).toBe(true);
  });

  it('tells a drag from an arrow key', () => {
    expect(movesIn([{ type: 'position', id: 'x', position: { x: 1, y: 1 }, dragging: true }])).toMatchObject({
      dragging: true,
    });
    expect(movesIn([{ type: 'position', id: 'x', dragging: false }]).moved).toEqual([]);
  });
});

describe('putting parts down', () => {
  const newId = (prefix: string) => `${prefix}-new`;
  const site = geometry.sites.find((candidate) => candidate.id === 's1')!.rect;

  it('takes the site whose frame is there, or makes one', () => {
    const inside = placePart(design, geometry, 'switch', { x: site.x + 50, y: site.y + 50 }, newId, {});
    expect(inside).toMatchObject({ patch: { devices: { 'sw-new': { site: 's1' } } } });
    const outside = placePart(
      design,
      geometry,
      'switch',
      { x: geometry.sheet.frame.x + 4, y: geometry.sheet.frame.y + 4 },
      newId,
      {},
    );
    expect(outside).toMatchObject({
      patch: { sites: { 'site-new': {} }, devices: { 'sw-new': { site: 'site-new' } } },
    });
    expect(siteAt(geometry, { x: -50, y: -50 })).toBeUndefined();
  });

  it.each(['firewall', 'ha-pair', 'router', 'host', 'site', 'transport', 'note'] as const)(
    'puts down a valid %s',
    (part) => {
      const operation = placePart(
        design,
        geometry,
        part,
        { x: 400, y: 300 },
        (prefix) => `${prefix}-${Math.abs(prefix.length)}${part}`,
        {},
      );
      expect(operation.ok && parseDesign(applyPatch(design, operation.patch)).ok).toBe(true);
    },
  );

  it('finds free ground for what the keyboard places', () => {
    for (const part of ['firewall', 'switch', 'host'] as const) {
      const at = freePlace(design, geometry, part, 's1', { x: 600, y: 400 });
      for (const { rect } of geometry.devices)
        expect(
          at.x >= rect.x && at.x <= rect.x + rect.width && at.y >= rect.y && at.y <= rect.y + rect.height,
        ).toBe(false);
    }
  });

  it('picks pips before plates, rings before bands', () => {
    const pip = geometry.devices.find((device) => device.id === 'sw-s1')!.pips[0]!;
    expect(endAt(geometry, pip.at)).toMatchObject({ kind: 'device', id: 'sw-s1', port: pip.port });
    const ring = geometry.rings[0]!;
    expect(endAt(geometry, ring.centre)).toEqual({ kind: 'endpoint', id: ring.endpoint });
    const limb = geometry.bands[0]!.limbs[0]!;
    expect(endAt(geometry, { x: limb.x + 4, y: limb.y + limb.height - 4 })).toEqual({
      kind: 'transport',
      id: 'coast',
    });
    expect(endAt(geometry, { x: -100, y: -100 })).toBeUndefined();
  });
});

it('a note that is pinned to an element stands beside it, clear of all devices, in one step', () => {
  const operation = pinNoteBeside(design, geometry, { collection: 'devices', id: 'fw-s2' }, () => 'note-1');
  const after = applyPatch(design, operation.ok ? operation.patch : {});
  expect(parseDesign(after)).toMatchObject({ ok: true });
  expect(after.notes['note-1']!.target).toEqual({ collection: 'devices', id: 'fw-s2' });
  const drawn = route(after);
  const note = drawn.notes.find(({ id }) => id === 'note-1')!.rect;
  expect(after.layout.notes!['note-1']).toEqual({ x: note.x, y: note.y });
  // Near enough that its leader is seen at a glance.
  const anchor = anchorOf(drawn, { collection: 'devices', id: 'fw-s2' })!;
  const dx = Math.max(note.x - anchor.x, anchor.x - note.x - note.width, 0);
  const dy = Math.max(note.y - anchor.y, anchor.y - note.y - note.height, 0);
  expect(Math.hypot(dx, dy)).toBeLessThan(120);
  for (const { rect } of drawn.devices)
    expect(
      note.x < rect.x + rect.width &&
        rect.x < note.x + note.width &&
        note.y < rect.y + rect.height &&
        rect.y < note.y + note.height,
    ).toBe(false);
});
