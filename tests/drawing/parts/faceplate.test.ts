import { describe, expect, it } from 'vitest';
import type { Tone } from '#drawing/decorations.ts';
import { noDecorations } from '#drawing/decorations.ts';
import type { DeviceGeometry } from '#drawing/geometry.ts';
import { devicePart } from '#drawing/parts/device-part.ts';
import type { DeviceFacts } from '#drawing/parts/drawing-facts.ts';
import type { Level } from '#drawing/parts/level-of-detail.ts';
import { pipMark } from '#drawing/parts/pips.ts';
import type { Shape } from '#drawing/shape.ts';
import { allShapes, factsWith, keyed, wordsOf } from './sample-geometry.ts';

const plate = { x: 0, y: 0, width: 136, height: 76 };
const firewall: DeviceGeometry = {
  id: 'fw-gul',
  kind: 'firewall',
  plates: [{ rect: plate }],
  mirrored: false,
  pips: [
    { device: 'fw-gul', port: 'lan1', at: { x: 68, y: 76 }, side: 'bottom', shape: 'square', cabled: true },
    { device: 'fw-gul', port: 'wan1', at: { x: 0, y: 19 }, side: 'left', shape: 'lozenge', cabled: true },
  ],
  rect: plate,
};
const host: DeviceGeometry = {
  ...firewall,
  id: 'cam',
  kind: 'host',
  plates: [{ rect: { x: 0, y: 0, width: 112, height: 42 } }],
  pips: [],
};
const devices: { readonly [id: string]: DeviceFacts } = {
  'fw-gul': {
    site: 'gul',
    kind: 'firewall',
    name: 'fw-gul',
    glyph: 'firewall',
    second: 'firewall',
    ports: { lan1: { number: 2, shut: false }, wan1: { number: 1, shut: false } },
  },
  cam: { site: 'orr', kind: 'host', name: 'cam-orr', glyph: 'camera', second: '10.130.1.32', ports: {} },
};
const facts = factsWith({}, { devices });
const drawn = (device: DeviceGeometry, level: Level, tones: readonly Tone[] = []): Shape =>
  devicePart(device, facts, {
    level,
    decorations: { ...noDecorations, tones: { [`devices/${device.id}`]: tones } },
  });

describe('a faceplate', () => {
  it('says less from further away', () => {
    expect(wordsOf(drawn(firewall, 'near'))).toEqual(['fw-gul', 'firewall', '2']);
    expect(wordsOf(drawn(firewall, 'work'))).toEqual(['fw-gul', 'firewall']);
    expect(wordsOf(drawn(firewall, 'plan'))).toEqual(['fw-gul']);
    expect(wordsOf(drawn(firewall, 'far'))).toEqual([]);
    expect(wordsOf(drawn(host, 'near'))).toEqual(['cam-orr', '10.130.1.32']);
    expect(wordsOf(drawn(host, 'work'))).toEqual(['cam-orr']);
  });

  it('keeps the whole name as a tooltip where it has to be shortened', () => {
    const name = 'fw-of-the-northern-terminal-building-by-the-old-harbour';
    const long = factsWith({}, { devices: { 'fw-gul': { ...devices['fw-gul']!, name } } });
    const shape = devicePart(firewall, long, { level: 'near', decorations: noDecorations });
    expect(wordsOf(shape)[0]).toMatch(/…$/);
    expect(allShapes(shape).find(({ el }) => el === 'title')?.children).toEqual([name]);
  });

  it('says that it failed, opens its strip and slashes its ports', () => {
    const failed = drawn(firewall, 'near', ['failed']);
    expect(wordsOf(failed)).toContain('failed');
    expect(keyed(failed, 'strip').map(({ key }) => key)).toEqual(['strip-edge']);
    const outline = keyed(failed, 'outline')[0];
    expect(outline?.attrs).toMatchObject({ stroke: 'var(--red)', strokeDasharray: '7 4' });
  });

  it('wears pencil ticks while selected and a lamp’s halo while lit', () => {
    expect(keyed(drawn(firewall, 'near', ['selected']), 'ticks')).toHaveLength(1);
    expect(keyed(drawn(firewall, 'near', ['lit']), 'halo')).toHaveLength(2);
    expect(keyed(drawn(firewall, 'near'), 'halo')).toHaveLength(0);
  });

  it('is readable while dimmed: secondary ink becomes ink', () => {
    const dimmed = drawn(firewall, 'near', ['dimmed']);
    expect(dimmed.attrs).toMatchObject({ opacity: 0.68 });
    expect(allShapes(dimmed).some(({ attrs }) => attrs['fill'] === 'var(--ink-2)')).toBe(false);
  });

  it('tells a standby member from an active one by an open, hatched strip', () => {
    const rects = [plate, { ...plate, x: 14, y: 90 }] as const;
    const pair: DeviceGeometry = {
      ...firewall,
      id: 'fw-ho',
      kind: 'ha-pair',
      plates: [
        { member: 1, rect: rects[0] },
        { member: 2, rect: rects[1] },
      ],
      bracket: { side: 'right', rect: { x: 136, y: 11, width: 29, height: 144 } },
      pips: [],
    };
    const members = [
      { member: 1, name: 'fw-ho-1', word: 'active' },
      { member: 2, name: 'fw-ho-2', word: 'standby' },
    ] as const;
    const shape = devicePart(
      pair,
      factsWith(
        {},
        { devices: { 'fw-ho': { ...devices['fw-gul']!, kind: 'ha-pair', name: 'fw-ho', members } } },
      ),
      { level: 'near', decorations: { ...noDecorations, tones: { 'devices/fw-ho@1': ['failed'] } } },
    );
    const [first, second] = keyed(shape, 'plate-');
    expect(keyed(second!, 'hatch')).toHaveLength(1);
    expect(keyed(first!, 'hatch')).toHaveLength(0);
    expect(wordsOf(first!)).toContain('failed');
    expect(wordsOf(second!)).toContain('standby');
    expect(keyed(shape, 'bracket')).toHaveLength(1);
    expect(wordsOf(shape)).toContain('fw-ho\u00a0HA pair');
  });
});

describe('a pip', () => {
  it('is hollow while free, filled while cabled and slashed while shut', () => {
    const at = { x: 0, y: 0 };
    expect(pipMark('square', at, { cabled: false }).attrs['fill']).toBe('var(--plate)');
    expect(pipMark('square', at, { cabled: true }).attrs['fill']).toBe('var(--ink)');
    const slashes = (shut: boolean): number =>
      String(pipMark('round', at, { cabled: false, shut }).attrs['d']).split('M').length;
    expect(slashes(true)).toBe(slashes(false) + 1);
    expect(pipMark('lozenge', at, { cabled: true, fault: true }).attrs['fill']).toBe('var(--red)');
  });

  it('has a form for each kind of port', () => {
    const forms = (['square', 'round', 'lozenge', 'bar'] as const).map(
      (form) => pipMark(form, { x: 0, y: 0 }, { cabled: false }).attrs['d'],
    );
    expect(new Set(forms).size).toBe(4);
  });
});
