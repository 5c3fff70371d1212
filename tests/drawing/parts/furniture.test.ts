import { describe, expect, it } from 'vitest';
import { noDecorations } from '#drawing/decorations.ts';
import type { BandGeometry, Rect } from '#drawing/geometry.ts';
import { bandPart } from '#drawing/parts/band-part.ts';
import type { SegmentFacts } from '#drawing/parts/drawing-facts.ts';
import { legendPart } from '#drawing/parts/legend-part.ts';
import { standingNotesPart } from '#drawing/parts/notes-part.ts';
import { framePart } from '#drawing/parts/paper-part.ts';
import { insetLoop, rectilinearOutline } from '#drawing/parts/rectilinear-outline.ts';
import { titleBlockPart } from '#drawing/parts/title-block-part.ts';
import { textWidth } from '#drawing/text-width.ts';
import { allShapes, factsWith, keyed, segmentOf, sheetWith, wordsOf } from './sample-geometry.ts';

const look = { level: 'near' as const, decorations: noDecorations };
const { sheet } = sheetWith({});
const facts = factsWith({});

const row = (letter: string): SegmentFacts => ({
  ...segmentOf(letter),
  name: `Segment ${letter}`,
  vlan: '110',
  subnet: '2001:db8:110:220::/64',
  carries: 'unicast',
});

describe('the title block', () => {
  it('names its data fields and never cuts an identification', () => {
    const identification = 'SMF-L2-004-NORTH-QUAY-7-OF-THE-SECOND-STAGE';
    const words = wordsOf(titleBlockPart(sheet, { ...facts.titleBlock, identification }, 'near'));
    expect(words).toEqual(
      expect.arrayContaining(['Legal owner', 'Document type', 'Identification no.', 'Rev.', identification]),
    );
  });

  it('wraps and shrinks a long title without losing a word', () => {
    const title = 'Stretch of the ticketing and berth control segments to the northern terminals';
    const shape = titleBlockPart(sheet, { ...facts.titleBlock, title }, 'near');
    const lines = keyed(shape, 'title').flatMap(wordsOf);
    expect(lines.join(' ')).toContain(title);
  });

  it('keeps three facts at half size and the title alone from afar', () => {
    expect(wordsOf(titleBlockPart(sheet, facts.titleBlock, 'plan'))).toEqual([
      'Terminals stretch',
      'SMF-L2-004',
      'Rev. C',
      'Draft',
    ]);
    expect(wordsOf(titleBlockPart(sheet, facts.titleBlock, 'far'))).toEqual(['Terminals stretch']);
  });
});

describe('the legend', () => {
  it('gives every segment a row inside its frame and keeps subnets whole', () => {
    const letters = [...'ABCDEFGHIJKL'];
    const tall = { ...sheet, legend: { ...sheet.legend, y: 580, height: 297 } };
    const shape = legendPart(tall, letters.map(row), 'near');
    const rows = letters.map((letter) =>
      allShapes(shape).find(({ data }) => data?.ref?.id === letter.toLowerCase())!,
    );
    const middles = rows.map((r) => Number(keyed(r, 'line-')[0]?.attrs['y']));
    expect(Math.max(...middles)).toBeLessThan(tall.legend.y + tall.legend.height);
    expect(wordsOf(shape).filter((word) => word === '2001:db8:110:220::/64')).toHaveLength(12);
  });

  it('is left out while there are no segments', () => {
    expect(legendPart(sheet, [], 'near').children).toEqual([]);
  });
});

describe('the zone grid', () => {
  it('names columns with numbers and rows with letters on both sides', () => {
    const words = wordsOf(framePart(sheet, 'near'));
    for (const name of [...'12345678', ...'ABCDEF'])
      expect(
        words.filter((word) => word === name),
        name,
      ).toHaveLength(2);
  });
});

describe('a band', () => {
  const transports = {
    coast: {
      name: 'Coastal access',
      kind: 'internet',
      trusted: false,
      trust: 'not trusted',
      latency: '18 ms ± 3',
      mtu: 'MTU 1500',
      loss: 'loss 0.02 %',
    },
    ring: { name: 'Quay ring', kind: 'own', trusted: true, trust: 'trusted' },
  } as const;
  const band = (id: string, text: Partial<BandGeometry['text']> = {}): BandGeometry => ({
    id,
    limbs: [{ x: 628, y: 30, width: 122, height: 847 }],
    orientation: 'vertical',
    text: { mode: 'in', rect: { x: 628, y: 640, width: 122, height: 118 }, ...text },
  });
  const drawn = (b: BandGeometry) => bandPart(b, sheet, factsWith({}, { transports }), look);

  it('says trust in words as well as by its edges', () => {
    expect(wordsOf(drawn(band('coast')))).toEqual([
      'Coastal access',
      'internet',
      '18 ms ± 3',
      'MTU 1500',
      'loss 0.02 %',
      'not trusted',
    ]);
    expect(keyed(drawn(band('coast')), 'edge')[0]?.attrs['strokeDasharray']).toBe('16 7');
    expect(keyed(drawn(band('coast')), 'ticks')).toHaveLength(1);
    expect(wordsOf(drawn(band('ring')))).toEqual(['Quay ring', 'own', 'trusted']);
    expect(keyed(drawn(band('ring')), 'edge')[0]?.attrs['strokeDasharray']).toBeUndefined();
    expect(keyed(drawn(band('ring')), 'inner')).toHaveLength(1);
  });

  it('draws no line where it ends on the frame', () => {
    expect(keyed(drawn(band('coast')), 'edge')[0]?.attrs['d']).toBe('M750 30L750 877M628 877L628 30');
  });

  it('says less along its edge when it is short, but never leaves out trust before figures', () => {
    const turned = (height: number) =>
      wordsOf(drawn(band('coast', { mode: 'turned', rect: { x: 630, y: 100, width: 20, height } })))[0];
    expect(turned(500)).toBe('Coastal access, internet, 18 ms ± 3, MTU 1500, loss 0.02 %, not trusted');
    expect(turned(190)).toBe('Coastal access, not trusted');
    expect(turned(60)).toBe('Coastal access');
  });
});

describe('an outline round rectangles', () => {
  it('joins two limbs and their header to one loop and moves it inwards', () => {
    const rects: readonly Rect[] = [
      { x: 0, y: 0, width: 100, height: 20 },
      { x: 0, y: 20, width: 20, height: 80 },
      { x: 80, y: 20, width: 20, height: 80 },
    ];
    const loops = rectilinearOutline(rects);
    expect(loops).toHaveLength(1);
    expect(loops[0]).toHaveLength(8);
    const inner = insetLoop(loops[0]!, 5);
    expect(inner).toContainEqual({ x: 5, y: 5 });
    expect(inner).toContainEqual({ x: 15, y: 15 });
    expect(inner).toContainEqual({ x: 95, y: 95 });
  });

  it('keeps apart what does not touch', () => {
    const apart = rectilinearOutline([
      { x: 0, y: 0, width: 10, height: 10 },
      { x: 20, y: 0, width: 10, height: 10 },
    ]);
    expect(apart.map((loop) => loop.length)).toEqual([4, 4]);
  });
});

describe('standing notes', () => {
  const notes = {
    n1: { text: 'Keys are in the vault.' },
    n2: {
      text: 'UDP 4789 at both ends, outer DF set, inner IP packets up to 1396 B, at every site on the coast.',
    },
  };
  const withNotes = factsWith({}, { notes });
  const placed = sheetWith({
    notes: ['n1', 'n2'].map((id, i) => {
      const rect = { x: 52, y: 80 + i * 21, width: 460, height: 19 };
      return { id, at: { x: rect.x, y: rect.y }, standing: true, rect };
    }),
  });

  it('are numbered under a heading, whole, and inside their room', () => {
    const shape = standingNotesPart(placed, withNotes, look)!;
    const words = wordsOf(shape);
    expect(words.slice(0, 4)).toEqual(['Notes', '1', notes.n1.text, '2']);
    expect(words.slice(4).join(' ')).toBe(notes.n2.text);
    for (const line of words.slice(4)) expect(textWidth(line, 14)).toBeLessThanOrEqual(460 - 18);
  });

  it('are left to the note list from afar', () => {
    expect(standingNotesPart(placed, withNotes, { ...look, level: 'plan' })).toBeUndefined();
  });
});
