import { describe, expect, it } from 'vitest';
import { exportLayers, exportLooks, exportPapers } from '../../../src/contract/sheet-exports.ts';
import { paperNames, paperSizesMm } from '../../../src/drawing/picture/paper-sizes.ts';
import { sheetFrame } from '../../../src/drawing/routing/sheet-frame.ts';
import { themes } from '../../../src/drawing/theme/tokens.ts';
import { viewLayers } from '../../../src/drawing/view-layers.ts';
import { firstChoice, rememberChoice, rememberedChoice } from '../../../src/features/export/export-choice.ts';
import { pngExtent } from '../../../src/features/export/picture-png.ts';
import { paperWords, pixelWords, smallPrint } from '../../../src/features/export/size-words.ts';

const storageWith = (text: string | null) => ({ getItem: () => text });

describe('the choice of an export', () => {
  it('is remembered by the browser', () => {
    let kept: string | null = null;
    const choice = {
      ...firstChoice,
      format: 'png' as const,
      scale: '3' as const,
      layers: ['overlay' as const],
    };
    rememberChoice({ setItem: (_key, text) => (kept = text) }, choice);
    expect(rememberedChoice(storageWith(kept))).toEqual(choice);
  });

  it.each([null, '', '{', '{"format":"gif"}', '[]', JSON.stringify({ ...firstChoice, layers: [] })])(
    'begins anew where %s was kept',
    (text) => {
      expect(rememberedChoice(storageWith(text))).toEqual(firstChoice);
    },
  );

  it('goes on where the browser keeps nothing', () => {
    const full = {
      setItem: () => {
        throw new Error('QuotaExceededError');
      },
    };
    expect(() => rememberChoice(full, firstChoice)).not.toThrow();
  });

  it('offers what can be drawn, no less and no more', () => {
    expect(exportLooks).toEqual(themes);
    expect(exportLayers).toEqual(viewLayers);
    expect([...exportPapers].sort()).toEqual([...paperNames].sort());
  });
});

describe('the size of a file', () => {
  const box = { x: -17, y: -4, width: 1314, height: 929 };

  it('is said in pixels, and refused before the browser fails', () => {
    expect(pngExtent(box, 2)).toEqual({ width: 2628, height: 1858, tooLarge: false });
    expect(pixelWords(pngExtent(box, 2))).toBe('2,628 × 1,858 px');
    expect(pngExtent({ ...box, width: 3654, height: 2584 }, 4)).toMatchObject({ tooLarge: true });
    expect(pngExtent({ ...box, width: 20_000, height: 10 }, 1)).toMatchObject({ tooLarge: true });
  });

  it('is said in millimetres, with a word where the small print becomes too small', () => {
    expect(paperWords('A3')).toBe(`A3, ${paperSizesMm.A3.width} × ${paperSizesMm.A3.height} mm`);
    expect(smallPrint(sheetFrame('A3', 3), 'A3')).toBeUndefined();
    expect(smallPrint(sheetFrame('A3', 3), 'A1')).toBeUndefined();
    expect(smallPrint(sheetFrame('A3', 3), 'A4')).toBe(
      'Drawn for A3: on A4 the smallest letters are 1.3 mm high.',
    );
    expect(smallPrint(sheetFrame('A1', 3), 'A3')).toMatch(/1\.0 mm/);
  });
});
