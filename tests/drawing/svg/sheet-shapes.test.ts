// @vitest-environment jsdom
import { describe, expect, it } from 'vitest';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import type { Decorations, Severity, Tone } from '#drawing/decorations.ts';
import { noDecorations } from '#drawing/decorations.ts';
import { balloonParts } from '#drawing/parts/balloon-part.ts';
import { drawingFacts } from '#drawing/parts/drawing-facts.ts';
import { hopMarks } from '#drawing/parts/hop-marks.ts';
import { levels } from '#drawing/parts/level-of-detail.ts';
import { pinnedNotePart } from '#drawing/parts/notes-part.ts';
import { anchorOf } from '#drawing/routing/anchors.ts';
import { route } from '#drawing/routing/route.ts';
import type { Shape } from '#drawing/shape.ts';
import { sheetShapes } from '#drawing/svg/sheet-shapes.ts';
import { thumbnailSvgText } from '#drawing/svg/thumbnail-svg.ts';
import { themeColours } from '#drawing/theme/tokens.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { chainDesign, hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { allShapes, wordsOf } from '../parts/sample-geometry.ts';

const tidied = (design: Design): Design => applyPatch(design, tidy(design)) as Design;
const segmentsOf = (design: Design) => tunnelSegments(indexNetwork(design));

const designs: { readonly [name: string]: Design } = {
  pair: tidied(pairDesign({ segments: ['a', 'b'] })),
  'hub with a pair': tidied(hubDesign(3, { segments: ['a', 'b', 'c'], hub: 'ha-pair' })),
  'chain of bare tunnels': tidied(chainDesign(3, { join: { protectedBy: false } })),
  mesh: tidied(meshDesign(4)),
  'without a layout': hubDesign(2),
};

/** Every element wears every tone it can, every tunnel is cut or loops. */
const everything = (design: Design): Decorations => {
  const tunnels = Object.keys(design.tunnels);
  const tones: { [key: string]: readonly Tone[] } = {};
  for (const collection of [
    'sites',
    'devices',
    'transports',
    'links',
    'endpoints',
    'associations',
    'tunnels',
  ] as const)
    Object.keys(design[collection]).forEach((id, i) => {
      tones[`${collection}/${id}`] = [
        (['selected', 'hovered', 'lit', 'dimmed', 'failed', 'fault'] as const)[i % 6]!,
      ];
    });
  const [first, second] = Object.entries(design.devices);
  return {
    ...noDecorations,
    tones,
    cuts: tunnels.slice(0, 1).map((tunnel) => ({ tunnel, vnis: { a: 10120, b: 10210 } })),
    loops: [
      { steps: tunnels.map((id) => ({ collection: 'tunnels' as const, id, direction: 'a-to-b' as const })) },
    ],
    ghosts: [
      {
        id: 'ghost',
        from: { device: first![0], port: Object.keys(first![1].ports)[0]! },
        to: { device: second![0], port: Object.keys(second![1].ports)[0]! },
        label: 'second uplink',
      },
    ],
    overhangs: tunnels.slice(0, 1).map((tunnel) => ({
      tunnel,
      end: 'a' as const,
      packetBytes: 1604,
      mtuBytes: 1500,
    })),
  };
};

const siblingKeys = (shape: Shape): readonly string[] =>
  (shape.children ?? []).flatMap((child) => (typeof child === 'string' ? [] : (child.key ?? [])));

describe.each(Object.entries(designs))('the sheet of a %s', (_name, design) => {
  const geometry = route(design);
  const facts = drawingFacts(design, segmentsOf(design));

  it.each(levels)('is sound at the level %s, whatever is shown on top', (level) => {
    const paints = new Set(['none', ...Object.keys(themeColours('paper')).map((name) => `var(--${name})`)]);
    const problems: string[] = [];
    const repeated = (where: string, keys: readonly (string | undefined)[]): void => {
      if (new Set(keys).size !== keys.length) problems.push(`${where}: repeated key in ${keys.join()}`);
    };
    for (const decorations of [noDecorations, everything(design)])
      for (const { name, shapes } of sheetShapes(geometry, { level, decorations, facts })) {
        repeated(
          name,
          shapes.map(({ key }) => key),
        );
        for (const shape of shapes.flatMap(allShapes)) {
          repeated(shape.key ?? shape.el, siblingKeys(shape));
          for (const [attribute, value] of Object.entries(shape.attrs)) {
            if (/NaN|Infinity|undefined/.test(String(value ?? 0))) problems.push(`${attribute} is ${value}`);
            if ((attribute === 'fill' || attribute === 'stroke') && !paints.has(String(value ?? 'none')))
              problems.push(`${attribute} ${value} is no token`);
          }
        }
      }
    expect(problems).toEqual([]);
  });

  it('shows every VNI, address and name whole at 100 %', () => {
    const words = sheetShapes(geometry, { level: 'near', decorations: noDecorations, facts })
      .flatMap(({ shapes }) => shapes)
      .flatMap(wordsOf);
    for (const tunnel of Object.values(design.tunnels)) expect(words).toContain(String(tunnel.a.vni));
    for (const endpoint of Object.values(design.endpoints))
      expect(words).toContain(endpoint.ipv4?.split('/')[0]);
    for (const device of Object.values(design.devices))
      expect(
        words.some((word) => word.startsWith(device.name)),
        device.name,
      ).toBe(true);
  });
});

describe('a sheet', () => {
  it('draws cords over cables and bands, and rings over devices', () => {
    const design = designs['hub with a pair']!;
    const names = sheetShapes(route(design), {
      level: 'near',
      decorations: noDecorations,
      facts: drawingFacts(design, segmentsOf(design)),
    }).map(({ name }) => name);
    const order = ['paper', 'frame', 'sites', 'bands', 'cables', 'cords', 'devices', 'rings'];
    expect(names.filter((name) => order.includes(name))).toEqual(order);
    expect(names.indexOf('faults')).toBeGreaterThan(names.indexOf('rings'));
  });
});

describe('a thumbnail', () => {
  const design = designs['hub with a pair']!;
  const [tunnel] = Object.keys(design.tunnels) as [string];
  const finding = (number: number, severity: Severity, waived = false) => ({
    number,
    severity,
    waived,
    at: { collection: 'tunnels', id: tunnel } as const,
  });
  const drawn = (decorations: Decorations) =>
    thumbnailSvgText(design, { theme: 'paper', tunnelSegments: segmentsOf(design), decorations });

  it('is a small picture without words', () => {
    const text = drawn(noDecorations);
    expect(text).toContain('width="212" height="150"');
    expect(text).not.toContain('<text');
    expect(text).not.toContain('var(--');
  });

  it('wears an octagon for each blocking finding, and none for the others', () => {
    const octagons = (decorations: Decorations): number =>
      drawn(decorations).split('layer-balloons')[1]!.split('<path').length - 1;
    const balloons = [
      finding(1, 'blocking'),
      finding(2, 'degrading'),
      finding(3, 'blocking', true),
      { ...finding(4, 'blocking'), at: { collection: 'devices', id: 'fw-s1' } as const },
    ];
    expect(octagons({ ...noDecorations, balloons })).toBe(2);
  });

  it('shows the design, not somebody’s selection', () => {
    expect(drawn({ ...noDecorations, tones: { 'devices/fw-s1': ['selected'] } })).toBe(drawn(noDecorations));
  });
});

describe('balloons', () => {
  const design = designs['hub with a pair']!;
  const geometry = route(design);
  const facts = drawingFacts(design, segmentsOf(design));
  const forwarder = Object.keys(design.forwarders)[0]!;
  const balloons: Decorations['balloons'] = [
    {
      number: 1,
      severity: 'blocking',
      waived: false,
      at: { collection: 'devices', id: 'fw-s1' },
      words: 'one member',
    },
    {
      number: 2,
      severity: 'degrading',
      waived: false,
      at: { collection: 'forwarders', id: forwarder },
      words: 'hidden',
    },
    { number: 3, severity: 'advisory', waived: false, at: { collection: 'segments', id: 'a' } },
  ];

  it('carry the number of every finding that has a place, and words for blocking ones only', () => {
    const drawn = balloonParts(geometry, facts, {
      level: 'near',
      decorations: { ...noDecorations, balloons },
    });
    expect(drawn.flatMap(wordsOf)).toEqual(['1', 'one member', '2']);
  });
});

describe('numbers of a trace', () => {
  const design = designs['hub with a pair']!;
  const geometry = route(design);
  const facts = drawingFacts(design, segmentsOf(design));

  it('stand where its steps happen, beside cables, and the failing one is red', () => {
    const [link] = Object.entries(design.links).find(([, { kind }]) => kind === 'cable')!;
    const hops = [
      { number: 1, at: { collection: 'links', id: link } as const, failing: false },
      { number: 2, at: { collection: 'devices', id: 'fw-s1' } as const, failing: true },
      { number: 3, at: { collection: 'segments', id: 'a' } as const, failing: false },
    ];
    const drawn = hopMarks(geometry, facts, { level: 'near', decorations: { ...noDecorations, hops } });
    expect(drawn.flatMap(wordsOf)).toEqual(['1', '2']);
    const circles = drawn.flatMap(allShapes).filter(({ el }) => el === 'circle');
    expect(circles.map(({ attrs }) => attrs['fill'])).toEqual(['var(--strip)', 'var(--red)']);
    const anchor = anchorOf(geometry, { collection: 'links', id: link })!;
    const { cx, cy } = circles[0]!.attrs;
    expect(Math.hypot(Number(cx) - anchor.x, Number(cy) - anchor.y)).toBeCloseTo(15.5, 6);
  });
});

describe('a pinned note', () => {
  const base = designs['pair']!;
  const design: Design = {
    ...base,
    notes: { n: { text: 'Swap this firewall in May.', target: { collection: 'devices', id: 'fw-s1' } } },
  };

  it('stands on a shelf with a leader to what it speaks of', () => {
    const geometry = route(design);
    const note = pinnedNotePart('n', geometry, drawingFacts(design, segmentsOf(design)), {
      level: 'near',
      decorations: noDecorations,
    })!;
    expect(wordsOf(note).join(' ')).toBe('Swap this firewall in May.');
    const target = anchorOf(geometry, { collection: 'devices', id: 'fw-s1' })!;
    expect(allShapes(note).find(({ el }) => el === 'circle')?.attrs).toMatchObject({
      cx: target.x,
      cy: target.y,
    });
  });
});
