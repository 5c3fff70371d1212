import { describe, expect, it } from 'vitest';
import type { Decorations } from '#drawing/decorations.ts';
import { noDecorations } from '#drawing/decorations.ts';
import { coreStrokes } from '#drawing/parts/cord.ts';
import { cutMarks } from '#drawing/parts/cuts.ts';
import { capText, differingDigits, ferruleMark } from '#drawing/parts/ferrule.ts';
import { jacketPart } from '#drawing/parts/jacket-part.ts';
import { chevronPlaces, loopChevrons } from '#drawing/parts/loop-chevrons.ts';
import { ringPart } from '#drawing/parts/ring-part.ts';
import { group } from '#drawing/shape.ts';
import {
  allShapes,
  factsWith,
  keyed,
  levelJacket,
  ringWith,
  segmentOf,
  sheetWith,
  wordsOf,
} from './sample-geometry.ts';

const look = (more: Partial<Decorations> = {}) => ({
  level: 'near' as const,
  decorations: { ...noDecorations, ...more },
});
const [a, b, c] = ['A', 'B', 'C'].map(segmentOf) as [
  ReturnType<typeof segmentOf>,
  ReturnType<typeof segmentOf>,
  ReturnType<typeof segmentOf>,
];

describe('a ferrule', () => {
  it('shows the letter, or the first and how many more, or a question mark', () => {
    expect(capText([b])).toBe('B');
    expect(capText([a, b, c])).toBe('A+2');
    expect(capText([])).toBe('?');
  });

  it('shows a VNI of eight digits whole', () => {
    const shapes = ferruleMark({
      rect: { x: 0, y: 0, width: 88, height: 21 },
      capSide: 'right',
      vni: 16_777_215,
      segments: [a, b, c],
      level: 'near',
    });
    expect(wordsOf(group(shapes))).toEqual(['A+2', '16777215']);
  });

  it('marks the digits in which two VNIs differ, counted from the last one', () => {
    expect(differingDigits(10120, 10210)).toEqual([false, false, true, true, false]);
    expect(differingDigits(10120, 120)).toEqual([true, true, false, false, false]);
    expect(differingDigits(120, 10120)).toEqual([true, false, false]);
    expect(differingDigits(10120, undefined)).not.toContain(true);
    expect(differingDigits(10120, 10120)).not.toContain(true);
  });

  it('shows each end’s own VNI at the ring where the tunnel ends', () => {
    const facts = factsWith({ t: { vni: { a: 10120, b: 10210 } } });
    expect(wordsOf(ringPart(ringWith('lo-a', 't'), facts, look()))).toContain('10120');
    expect(wordsOf(ringPart(ringWith('lo-b', 't'), facts, look()))).toContain('10210');
  });
});

describe('a core', () => {
  const path = levelJacket('x', 'bare', ['t']).lanes[0]!.path;

  it('is divided lengthwise between its segments in letter order', () => {
    const cores = coreStrokes(path, ['a', 'b', 'c'], 9, false).filter(({ key }) => key?.startsWith('core'));
    expect(cores.map(({ attrs }) => attrs['stroke'])).toEqual([
      'var(--seg-a)',
      'var(--seg-b)',
      'var(--seg-c)',
    ]);
    expect(cores.map(({ attrs }) => attrs['d'])).toEqual([
      'M100 197L500 197',
      'M100 200L500 200',
      'M100 203L500 203',
    ]);
  });

  it('scales its pattern with its width', () => {
    const pattern = (widthPx: number) => coreStrokes(path, ['b'], widthPx, false)[1]?.attrs;
    expect(pattern(9)).toMatchObject({ strokeWidth: 9, strokeDasharray: '2.4 11' });
    expect(pattern(18)).toMatchObject({ strokeWidth: 18, strokeDasharray: '4.8 22' });
  });

  it('changes places with its letter’s colour where black would be lost in the jacket', () => {
    expect(coreStrokes(path, ['h'], 9, false)[0]?.attrs['stroke']).toBe('var(--seg-h)');
    expect(coreStrokes(path, ['h'], 8, true)[0]?.attrs['stroke']).toBe('var(--tracer-h)');
  });
});

describe('a jacket', () => {
  const tunnels = ['t1', 't2', 't3'];
  const jacket = levelJacket('as', 'jacket', tunnels);
  const facts = factsWith({ t1: { segments: [a] }, t2: { segments: [b] }, t3: { segments: [c] } });
  const geometry = sheetWith({ jackets: [jacket] });

  it('holds a tracer in each lane, on the lane’s own path', () => {
    const tracers = keyed(jacketPart(jacket, geometry, facts, look()), 'tracer-');
    expect(tracers.map(({ key }) => key)).toEqual(['tracer-t1', 'tracer-t2', 'tracer-t3']);
    expect(keyed(tracers[0]!, 'core')[0]?.attrs['d']).toBe('M100 184L500 184');
  });

  it('opens over a severed lane only and keeps the others whole', () => {
    const cut = jacketPart(jacket, geometry, facts, look({ cuts: [{ tunnel: 't2' }] }));
    expect(keyed(cut, 'cut-').map(({ key }) => key)).toEqual(['cut-t2']);
    const [opening] = allShapes(keyed(cut, 'cut-')[0]!).filter(({ el }) => el === 'path');
    const ys = [...String(opening?.attrs['d']).matchAll(/[\d.]+ ([\d.]+)/g)].map((match) => Number(match[1]));
    // The middle lane's slot: half a lane up and half a lane down.
    expect(Math.min(...ys)).toBe(192);
    expect(Math.max(...ys)).toBe(208);
    expect(opening?.attrs['fill']).toBe('var(--paper)');
  });

  it('shows the band through an opening that lies over one', () => {
    const over = sheetWith({
      jackets: [jacket],
      bands: [
        {
          id: 't',
          limbs: [{ x: 200, y: 0, width: 200, height: 800 }],
          orientation: 'vertical',
          text: { mode: 'in', rect: { x: 200, y: 600, width: 200, height: 118 } },
        },
      ],
    });
    const cut = jacketPart(jacket, over, facts, look({ cuts: [{ tunnel: 't1' }] }));
    expect(keyed(cut, 'cut-')[0]?.children?.[0]).toMatchObject({ attrs: { fill: 'var(--band)' } });
  });

  it('flags both severed ends with their own VNIs and says between them that they differ', () => {
    const marks = group(
      cutMarks(geometry, facts, look({ cuts: [{ tunnel: 't2', vnis: { a: 10120, b: 10210 } }] })),
    );
    const [atA, atB] = keyed(marks, 'flag-');
    expect(wordsOf(atA!)).toContain('10120');
    expect(wordsOf(atB!)).toContain('10210');
    expect(keyed(marks, 'unequal')).toHaveLength(1);
    const silent = group(cutMarks(geometry, facts, look({ cuts: [{ tunnel: 't2' }] })));
    expect(keyed(silent, 'flag-')).toHaveLength(0);
    expect(keyed(silent, 'unequal')).toHaveLength(0);
  });

  it('fades lanes whose segments are hidden, and no others', () => {
    const faded = jacketPart(jacket, geometry, facts, look({ hiddenSegments: ['b'] }));
    const opacities = keyed(faded, 'tracer-').map(({ attrs }) => attrs['opacity']);
    expect(opacities).toEqual([undefined, 0.14, undefined]);
  });

  it('is hatched only as a bare cord, and only over an untrusted band', () => {
    const bare = levelJacket('t1', 'bare', ['t1']);
    expect(keyed(jacketPart(bare, geometry, facts, look()), 'hatch')).toHaveLength(0);
    const hatched = jacketPart({ ...bare, overBand: [bare.path] }, geometry, facts, look());
    expect(keyed(hatched, 'hatch')).toHaveLength(1);
    expect(keyed(hatched, 'hatch')[0]?.attrs['stroke']).toBe('var(--red)');
  });

  it('is a dashed leader with words where no way was found', () => {
    const stuck = jacketPart({ ...jacket, noWay: true }, geometry, facts, look());
    expect(wordsOf(stuck)).toContain('no way through');
    expect(keyed(stuck, 'tracer-')).toHaveLength(0);
  });

  it('draws a failed lane as its colour alone, broken', () => {
    const failed = jacketPart(jacket, geometry, facts, look({ tones: { 'tunnels/t2': ['failed'] } }));
    expect(keyed(failed, 'failed').map(({ attrs }) => attrs)).toMatchObject(
      Array.from({ length: 3 }, () => ({
        stroke: 'var(--seg-b)',
        strokeDasharray: '10 7',
        strokeWidth: 2.4,
      })),
    );
  });
});

describe('a loop', () => {
  const jacket = levelJacket('t1', 'jacket', ['t1']);
  const path = jacket.lanes[0]!.path;

  it('has a chevron every 26 px, none within 15 px of a cuff', () => {
    const xs = chevronPlaces(path, 'near').map(({ x }) => x);
    expect(Math.min(...xs)).toBeGreaterThanOrEqual(115);
    expect(Math.max(...xs)).toBeLessThanOrEqual(485);
    xs.slice(1).forEach((x, i) => expect(x - xs[i]!).toBeCloseTo(26, 6));
    expect(xs).toHaveLength(15);
  });

  it('drifts by one pitch and then looks as before', () => {
    const at = (phase: number) => chevronPlaces(path, 'near', phase).map(({ x }) => Math.round(x));
    expect(at(26)).toEqual(at(0));
    expect(at(5)[0]).toBe(at(0)[0]! + 5);
  });

  it('turns the same way all round, whichever way its tunnels were drawn', () => {
    const geometry = sheetWith({ jackets: [jacket] });
    const degrees = (direction: 'a-to-b' | 'b-to-a') =>
      allShapes(
        group(
          loopChevrons(
            geometry,
            look({ loops: [{ steps: [{ collection: 'tunnels', id: 't1', direction }] }] }),
          ),
        ),
      )
        .filter(({ attrs }) => attrs['className'] === 'chevron')
        .map(({ attrs }) => Math.abs(Number(/rotate\((-?[\d.]+)\)/.exec(String(attrs['transform']))?.[1])));
    expect(new Set(degrees('a-to-b'))).toEqual(new Set([0]));
    expect(new Set(degrees('b-to-a'))).toEqual(new Set([180]));
  });
});
