import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fitText, textWidth, wrapText } from '#drawing/text-width.ts';

describe('the width of text', () => {
  it('gives every digit the same width, so that numbers stand under one another', () => {
    const widths = new Set([...'0123456789'].map((digit) => textWidth(digit, 10, 600)));
    expect(widths.size).toBe(1);
    expect(textWidth('10110', 13.8, 600)).toBeCloseTo(41.7, 1);
  });

  it('grows in proportion to the size and with the weight', () => {
    expect(textWidth('fw-gul', 32, 600)).toBeCloseTo(2 * textWidth('fw-gul', 16, 600), 6);
    expect(textWidth('Gullhaven', 16, 700)).toBeGreaterThan(textWidth('Gullhaven', 16, 400));
  });

  it('counts an accented letter like its base letter and other scripts as wide', () => {
    expect(textWidth('é', 100)).toBe(textWidth('e', 100));
    expect(textWidth('渡', 100)).toBeGreaterThan(textWidth('x', 100));
  });
});

describe('wrapped text', () => {
  it('loses no word and keeps lines within the width, unless a word alone is wider', () => {
    fc.assert(
      fc.property(fc.array(fc.stringMatching(/^[a-z]{1,12}$/), { maxLength: 30 }), (words) => {
        const lines = wrapText(words.join(' '), 120, 14);
        expect(lines.join(' ')).toBe(words.join(' '));
        for (const line of lines) expect(textWidth(line, 14) <= 120 || !line.includes(' ')).toBe(true);
      }),
    );
  });
});

it('keeps words together that a no-break space joins', () => {
  expect(wrapText('loss\u00a00.02\u00a0% at\u00a0most', 60, 14)).toEqual([
    'loss\u00a00.02\u00a0%',
    'at\u00a0most',
  ]);
  expect(textWidth('\u00a0', 100)).toBe(textWidth(' ', 100));
});

describe('fitted text', () => {
  it('shrinks before it shortens', () => {
    const fitted = fitText('berth-controller', { maxWidthPx: 100, sizePx: 16, minSizePx: 9, weight: 600 });
    expect(fitted).toMatchObject({ lines: ['berth-controller'], shortened: false });
    expect(fitted.sizePx).toBeLessThan(16);
    expect(fitted.widthPx).toBeLessThanOrEqual(100);
  });

  it('ends what does not fit at the smallest size with an ellipsis and says so', () => {
    const fitted = fitText('the-longest-name-of-a-switch-on-this-coast', {
      maxWidthPx: 80,
      sizePx: 16,
      minSizePx: 11,
    });
    expect(fitted.shortened).toBe(true);
    expect(fitted.lines[0]).toMatch(/…$/);
    expect(fitted.widthPx).toBeLessThanOrEqual(80);
  });

  it('never cuts an address', () => {
    const address = '2001:db8:110:220:330:440:550:660';
    const fitted = fitText(address, { maxWidthPx: 72, sizePx: 12.5, minSizePx: 9, whole: true });
    expect(fitted.lines).toEqual([address]);
    expect(fitted.widthPx).toBeLessThanOrEqual(72.01);
  });

  it('uses all lines it may have before it shrinks further', () => {
    const fitted = fitText('Terminals stretch for the northern coast', {
      maxWidthPx: 220,
      maxLines: 2,
      sizePx: 16.8,
      minSizePx: 11,
      weight: 600,
    });
    expect(fitted.lines).toHaveLength(2);
    expect(fitted.sizePx).toBe(16.8);
  });
});
