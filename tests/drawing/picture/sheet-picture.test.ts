import { describe, expect, it } from 'vitest';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { tunnelStates } from '#engine/network/can-come-up.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import type { Decorations } from '#drawing/decorations.ts';
import { noDecorations } from '#drawing/decorations.ts';
import { findingsToDecorations } from '#drawing/findings-to-decorations.ts';
import { caution } from '#drawing/picture/caution-line.ts';
import { mmPerPx, paperSizesMm, pictureBox } from '#drawing/picture/paper-sizes.ts';
import type { PictureOptions } from '#drawing/picture/sheet-picture.ts';
import { sheetPicture } from '#drawing/picture/sheet-picture.ts';
import { route } from '#drawing/routing/route.ts';
import { themeColours, themes } from '#drawing/theme/tokens.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { demoDesign } from '../../../seeds/demo-designs/demo-design.ts';
import { chainDesign, hubDesign, meshDesign } from '../../support/designs.ts';
import { allShapes, wordsOf } from '../parts/sample-geometry.ts';

const tidied = (design: Design): Design => applyPatch(design, tidy(design));
const found = (design: Design): Decorations =>
  findingsToDecorations(
    runRules(design),
    [...tunnelStates(indexNetwork(design))].filter(([, state]) => !state.up).map(([id]) => id),
  );
const pictureOf = (design: Design, options: Partial<PictureOptions> = {}) =>
  sheetPicture(design, { look: 'paper', tunnelSegments: tunnelSegments(indexNetwork(design)), ...options });
type Picture = ReturnType<typeof pictureOf>;
const shapesOf = (picture: Picture) =>
  picture.layers.flatMap(({ shapes }) => shapes).flatMap((shape) => allShapes(shape));
const saidBy = (picture: Picture): readonly string[] =>
  picture.layers.flatMap(({ shapes }) => shapes).flatMap((shape) => wordsOf(shape));

const faultFree = demoDesign('fault-free');
const faulty = demoDesign('planted-faults');
const designs: { readonly [name: string]: Design } = {
  'fault-free demo': faultFree,
  'demo with planted faults': faulty,
  'hub of twelve sites with a pair': tidied(hubDesign(12, { segments: ['a', 'b', 'c'], hub: 'ha-pair' })),
  'chain of bare tunnels': tidied(chainDesign(4, { join: { protectedBy: false } })),
  mesh: tidied(meshDesign(4)),
};

describe.each(Object.entries(designs))('a picture of the %s', (_name, design) => {
  const decorations = found(design);

  it.each(themes)('in %s stands in plain colours, none of them blue pencil or lamp', (look) => {
    const colours = themeColours(look);
    const used = new Set(
      shapesOf(pictureOf(design, { look, decorations })).flatMap(({ attrs }) =>
        [attrs['fill'], attrs['stroke']].filter((value) => value !== undefined && value !== 'none'),
      ),
    );
    for (const colour of used) expect(colour).toMatch(/^#[0-9a-f]{6}$/);
    if (look === 'print' || look === 'print-colour') return;
    for (const pencil of ['blue', 'blue-soft', 'blue-wash', 'lamp', 'lamp-line'])
      expect([...used]).not.toContain(colours[pencil]);
  });

  it('printed on its own paper has no line under 0.18 mm and no capital under 1.8 mm', () => {
    const mm = mmPerPx(route(design).sheet, route(design).sheet.size);
    const picture = pictureOf(design, { look: 'print', decorations });
    // Height of capitals of Work Sans: 660 of 1,000 units of the em (OS/2 table of the font).
    const capital = 0.66;
    for (const { el, attrs } of shapesOf(picture)) {
      if (attrs['strokeWidth'] !== undefined && attrs['stroke'] !== 'none')
        expect(Number(attrs['strokeWidth']) * mm, JSON.stringify(attrs)).toBeGreaterThanOrEqual(0.18);
      if (el === 'text' && attrs['fontSize'] !== undefined)
        expect(Number(attrs['fontSize']) * capital * mm, JSON.stringify(attrs)).toBeGreaterThanOrEqual(1.8);
    }
  });

  it('says every VNI and every address of an endpoint as text', () => {
    const words = saidBy(pictureOf(design));
    const manifolds = route(design).rings.some((ring) => ring.manifold !== undefined);
    for (const { a, b } of Object.values(design.tunnels))
      if (!manifolds && a.vni === b.vni) expect(words).toContain(String(a.vni));
    for (const { ipv4 } of Object.values(design.endpoints)) expect(words).toContain(ipv4?.split('/')[0]);
  });

  it('carries the caution', () => {
    expect(saidBy(pictureOf(design))).toContain(caution);
  });
});

describe('what a picture shows', () => {
  it('has the paper’s proportions and holds the whole sheet', () => {
    for (const [name, { width, height }] of Object.entries(paperSizesMm))
      // Rounded to whole millimetres, ISO 216's sides differ from √2 by less than this.
      expect(width / height, name).toBeCloseTo(Math.SQRT2, 2);
    const { sheet } = route(faultFree);
    const box = pictureBox(sheet);
    expect(box.width / box.height).toBeCloseTo(sheet.width / sheet.height, 9);
    expect(box.x).toBeLessThanOrEqual(0);
    expect(box.y).toBeLessThanOrEqual(0);
    expect(box.x + box.width).toBeGreaterThanOrEqual(sheet.width);
    expect(box.y + box.height).toBeGreaterThanOrEqual(sheet.height);
  });

  it('is the same every time', () => {
    const decorations = found(faulty);
    expect(pictureOf(structuredClone(faulty) as Design, { decorations })).toEqual(
      pictureOf(faulty, { decorations }),
    );
  });

  it('has findings only where they are asked for', () => {
    const words = ['VNIs differ', '1604 in 1500', 'broadcast storm'];
    expect(saidBy(pictureOf(faulty, { decorations: found(faulty) }))).toEqual(expect.arrayContaining(words));
    const plain = saidBy(pictureOf(faulty));
    for (const word of words) expect(plain).not.toContain(word);
  });

  it('keeps selection, lamp, ghosts and hidden segments on the screen', () => {
    const shown: Decorations = {
      ...found(faulty),
      hops: [],
      hiddenSegments: [],
      ghosts: [],
    };
    const onScreen: Decorations = {
      ...found(faulty),
      tones: {
        ...shown.tones,
        [`devices/${Object.keys(faulty.devices)[0]!}`]: ['selected', 'lit', 'hovered', 'dimmed'],
      },
      hiddenSegments: Object.keys(faulty.segments),
      hops: [
        { number: 1, at: { collection: 'devices', id: Object.keys(faulty.devices)[0]! }, failing: false },
      ],
    };
    expect(onScreen.ghosts.length).toBeGreaterThan(0);
    expect(pictureOf(faulty, { decorations: onScreen })).toEqual(pictureOf(faulty, { decorations: shown }));
  });

  it('leaves out addresses on request, says so, and keeps names and VNIs', () => {
    const words = saidBy(pictureOf(faultFree, { addresses: false }));
    expect(words.filter((word) => /\d+\.\d+\.\d+\.\d+/.test(word))).toEqual([]);
    expect(words).toEqual(expect.arrayContaining(['ticket-1', '10110', 'Addresses left out']));
    expect(words).not.toContain('Subnet');
  });

  it('leaves out other layers on request, says so, and fades their ground', () => {
    const picture = pictureOf(faultFree, { view: { layers: ['overlay'] } });
    expect(saidBy(picture)).toContain('Shows overlay only');
    const layer = (of: Picture, name: string) => of.layers.find((each) => each.name === name)!.shapes;
    expect(layer(picture, 'cables')).toEqual([]);
    expect(layer(picture, 'cords')).toEqual(layer(pictureOf(faultFree), 'cords'));
    const switchShapes = layer(picture, 'devices').filter(
      ({ data }) => faultFree.devices[data?.ref?.id ?? '']?.kind === 'switch',
    );
    expect(switchShapes.length).toBeGreaterThan(0);
    expect(switchShapes.flatMap((shape) => allShapes(shape)).map(({ attrs }) => attrs['fill'])).not.toContain(
      themeColours('paper')['strip'],
    );
  });

  it('names in its legend the chosen segments alone', () => {
    const [ticketing] = Object.entries(faultFree.segments).find(([, { name }]) => name === 'Ticketing')!;
    const words = saidBy(pictureOf(faultFree, { view: { layers: [], segments: [ticketing] } }));
    expect(words).toEqual(expect.arrayContaining(['Ticketing', 'Shows segment A only']));
    expect(words).not.toContain('CCTV');
    expect(words).not.toContain('10130');
  });

  it('draws a cord that finds no way in ink', () => {
    const geometry = route(faultFree);
    const [first, ...others] = geometry.jackets;
    const picture = pictureOf(faultFree, {
      geometry: { ...geometry, jackets: [{ ...first!, noWay: true }, ...others] },
      decorations: noDecorations,
    });
    expect(saidBy(picture)).toContain('no way through');
    expect(shapesOf(picture).map(({ attrs }) => attrs['stroke'])).not.toContain(
      themeColours('paper')['blue'],
    );
  });
});
