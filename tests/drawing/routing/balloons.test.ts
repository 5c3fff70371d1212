import { describe, expect, it } from 'vitest';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { ElementRef } from '#engine/model/design.ts';
import { anchorOf } from '#drawing/routing/anchors.ts';
import { placeBalloons } from '#drawing/routing/balloons.ts';
import { route } from '#drawing/routing/route.ts';
import { sheetFrame, zoneOf } from '#drawing/routing/sheet-frame.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { ferriesDesign } from '../tidy/ferries.ts';

const bare = ferriesDesign();
const noted = applyPatch(bare, {
  notes: {
    n1: { text: 'UDP 4789 is permitted between the loopbacks at every site.', standing: true },
    n2: { text: 'Keys are in the vault.', standing: true },
    n3: { text: 'Behind the ticket hall', target: { collection: 'sites', id: 'gul' } },
  },
});
const design = applyPatch(noted, tidy(noted));
const geometry = route(design);
const refs: readonly ElementRef[] = (
  [
    'sites',
    'devices',
    'transports',
    'links',
    'endpoints',
    'associations',
    'tunnels',
    'forwarders',
    'notes',
  ] as const
).flatMap((collection) => Object.keys(design[collection]).map((id) => ({ collection, id })));

describe('anchorOf', () => {
  it('finds a point on the sheet for every element that is drawn', () => {
    const { frame } = geometry.sheet;
    for (const ref of refs) {
      const at = anchorOf(geometry, ref, design);
      expect(at, `${ref.collection} ${ref.id}`).toBeDefined();
      expect(at!.x).toBeGreaterThanOrEqual(frame.x);
      expect(at!.x).toBeLessThanOrEqual(frame.x + frame.width);
      expect(at!.y).toBeGreaterThanOrEqual(frame.y);
      expect(at!.y).toBeLessThanOrEqual(frame.y + frame.height);
    }
  });
  it('finds the pip of a port, on the member asked for', () => {
    const pips = geometry.devices.find((d) => d.id === 'fw-ho')!.pips.filter((p) => p.port === 'wan1');
    expect(pips).toHaveLength(2);
    for (const pip of pips)
      expect(
        anchorOf(geometry, { collection: 'devices', id: 'fw-ho', port: 'wan1', member: pip.member }),
      ).toEqual(pip.at);
  });
  it('has none for what is not drawn', () => {
    expect(anchorOf(geometry, { collection: 'segments', id: 'a' }, design)).toBeUndefined();
    expect(anchorOf(geometry, { collection: 'devices', id: 'nowhere' }, design)).toBeUndefined();
  });
  it('keeps the two tunnels of one association apart', () => {
    const a = anchorOf(geometry, { collection: 'tunnels', id: 'tn-ho-gul-a' })!;
    const b = anchorOf(geometry, { collection: 'tunnels', id: 'tn-ho-gul-b' })!;
    expect(Math.hypot(a.x - b.x, a.y - b.y)).toBeGreaterThan(14);
  });
});

describe('placeBalloons', () => {
  const anchors = refs
    .filter((ref) => ['devices', 'associations', 'tunnels'].includes(ref.collection))
    .slice(0, 12)
    .map((ref, i) => ({
      number: i + 1,
      at: anchorOf(geometry, ref, design)!,
      ...(i % 2 === 0 ? { words: 'VNI mismatch' } : {}),
    }));
  const boxOf = (b: ReturnType<typeof placeBalloons>[number]) => ({
    x: b.centre.x - 14,
    y: b.centre.y - 14,
    width: 28,
    height: 28,
  });
  const meets = (
    p: { x: number; y: number; width: number; height: number },
    q: { x: number; y: number; width: number; height: number },
  ): boolean => p.x < q.x + q.width && q.x < p.x + p.width && p.y < q.y + q.height && q.y < p.y + p.height;

  it('puts every balloon near its anchor, off plates, words and other balloons', () => {
    const placed = placeBalloons(geometry, anchors);
    expect(placed.map((b) => b.number)).toEqual(anchors.map((a) => a.number));
    placed.forEach((balloon, i) => {
      const distance = Math.hypot(balloon.centre.x - balloon.anchor.x, balloon.centre.y - balloon.anchor.y);
      expect(distance).toBeGreaterThan(43);
      expect(distance).toBeLessThan(216);
      const boxes = [boxOf(balloon), ...(balloon.words === undefined ? [] : [balloon.words.rect])];
      for (const box of boxes) {
        for (const device of geometry.devices)
          for (const plate of device.plates) expect(meets(box, plate.rect)).toBe(false);
        for (const ring of geometry.rings) expect(meets(box, ring.label.rect)).toBe(false);
        for (const other of placed.slice(i + 1)) expect(meets(box, boxOf(other))).toBe(false);
      }
    });
  });
  it('leaves out words that would cover something at the size they are read at from afar', () => {
    const scale = 1.45;
    const spoken = anchors.map(({ number, at }) => ({
      number,
      at,
      words: 'cannot carry any of its segments',
    }));
    const placed = placeBalloons(geometry, spoken, { scale });
    expect(placed.some(({ words }) => words === undefined)).toBe(true);
    for (const { words } of placed)
      if (words !== undefined)
        for (const device of geometry.devices)
          for (const plate of device.plates) expect(meets(words.rect, plate.rect)).toBe(false);
  });
  it('does not depend on the order in which findings come', () => {
    expect(placeBalloons(geometry, [...anchors].reverse())).toEqual(placeBalloons(geometry, anchors));
  });
  it('keeps a balloon where it was when an earlier one goes', () => {
    const before = placeBalloons(geometry, anchors);
    const after = placeBalloons(geometry, anchors.slice(1), { before });
    expect(after).toEqual(before.slice(1));
  });
});

describe('notes', () => {
  it('stand in one block in the order of their ids, on free paper', () => {
    const standing = geometry.notes.filter((note) => note.standing);
    expect(standing.map((note) => note.id)).toEqual(['n1', 'n2']);
    expect(standing[0]!.at.x).toBe(standing[1]!.at.x);
    expect(standing[0]!.rect.y + standing[0]!.rect.height).toBeLessThanOrEqual(standing[1]!.at.y);
    for (const note of geometry.notes)
      for (const band of geometry.bands)
        expect(band.limbs.some((limb) => meetsAll(limb, note.rect))).toBe(false);
  });
  it('stand where a person put them', () => {
    const put = applyPatch(design, { layout: { notes: { n3: { x: 77, y: 600 } } } });
    expect(route(put).notes.find((note) => note.id === 'n3')!.at).toEqual({ x: 77, y: 600 });
  });
});
const meetsAll = (
  p: { x: number; y: number; width: number; height: number },
  q: { x: number; y: number; width: number; height: number },
): boolean => p.x < q.x + q.width && q.x < p.x + p.width && p.y < q.y + q.height && q.y < p.y + p.height;

describe('zoneOf', () => {
  const sheet = sheetFrame('A3', 3);
  it('names the zone by row and column', () => {
    const { frame } = sheet;
    expect(zoneOf(sheet, { x: frame.x + 1, y: frame.y + 1 })).toBe('A1');
    expect(zoneOf(sheet, { x: frame.x + frame.width - 1, y: frame.y + frame.height - 1 })).toBe('F8');
    expect(
      zoneOf(sheet, { x: frame.x + (4.5 * frame.width) / 8, y: frame.y + (1.5 * frame.height) / 6 }),
    ).toBe('B5');
  });
  it('counts points off the sheet to its edge', () => {
    expect(zoneOf(sheet, { x: -5000, y: 99_999 })).toBe('F1');
  });
  it('leaves out the letters I and O on a large sheet', () => {
    const large = sheetFrame('A0', 3);
    const rows = Array.from({ length: 16 }, (_, i) =>
      zoneOf(large, { x: large.frame.x, y: large.frame.y + ((i + 0.5) * large.frame.height) / 16 }),
    );
    expect(rows.map((zone) => zone[0]).join('')).toBe('ABCDEFGHJKLMNPQR');
  });
});
