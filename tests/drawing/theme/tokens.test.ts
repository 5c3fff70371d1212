import { describe, expect, it } from 'vitest';
import { paletteKeys, paletteOf } from '#drawing/theme/segment-tokens.ts';
import { themeColours, themeCss, themes, themeVariables } from '#drawing/theme/tokens.ts';
import type { Theme } from '#drawing/theme/tokens.ts';

// WCAG 2.2, definitions of relative luminance and contrast ratio.
const luminance = (hex: string): number => {
  const [r = 0, g = 0, b = 0] = [1, 3, 5].map((at) => {
    const channel = Number.parseInt(hex.slice(at, at + 2), 16) / 255;
    return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
};
const contrast = (a: string, b: string): number => {
  const [light, dark] = [luminance(a), luminance(b)].sort((x, y) => y - x) as [number, number];
  return (light + 0.05) / (dark + 0.05);
};
const on = (theme: Theme, foreground: string, ground: string): number => {
  const colours = themeColours(theme);
  const [a, b] = [colours[foreground], colours[ground]];
  if (a === undefined || b === undefined) throw new Error(`no token ${foreground} or ${ground}`);
  return contrast(a, b);
};

const grounds = ['paper', 'plate', 'field', 'panel', 'raise', 'hover', 'desk', 'band'];
const texts = ['ink', 'ink-2', 'ink-3'];

describe('tokens', () => {
  it('measures black on white as 21 to 1', () => {
    expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 5);
  });

  it.each([
    ['paper', 4.8],
    ['slate', 5.19],
  ] as const)('keeps text on every ground of %s at %f or more', (theme, least) => {
    const ratios = grounds.flatMap((ground) => texts.map((text) => on(theme, text, ground)));
    expect(Math.min(...ratios)).toBeGreaterThanOrEqual(least);
  });

  it.each([
    ['paper', 4.67],
    ['slate', 6.2],
  ] as const)('keeps letters on their segments in %s at %f or more', (theme, least) => {
    for (const key of paletteKeys)
      expect(on(theme, `seg-${key}-on`, `seg-${key}`), key).toBeGreaterThanOrEqual(least);
  });

  it.each([
    ['paper', 3.23],
    ['slate', 4.1],
  ] as const)('keeps control borders of %s at %f or more', (theme, least) => {
    for (const ground of ['field', 'paper', 'panel', 'desk'])
      expect(on(theme, 'rule-strong', ground), ground).toBeGreaterThanOrEqual(least);
  });

  it.each(['paper', 'slate'] as const)(
    'keeps words of each severity readable on their washes in %s',
    (theme) => {
      for (const severity of ['red', 'degr', 'advi', 'ok', 'blue'])
        for (const ground of ['paper', 'plate', `${severity}-wash`])
          expect(on(theme, severity, ground), `${severity} on ${ground}`).toBeGreaterThanOrEqual(4.5);
      expect(on(theme, 'red-ink', 'red')).toBeGreaterThanOrEqual(4.5);
      expect(on(theme, 'blue-ink', 'blue')).toBeGreaterThanOrEqual(4.5);
      expect(on(theme, 'strip-ink', 'strip')).toBeGreaterThanOrEqual(4.5);
      expect(on(theme, 'on-brass', 'brass')).toBeGreaterThanOrEqual(4.5);
      expect(on(theme, 'seg-none-on', 'seg-none')).toBeGreaterThanOrEqual(4.5);
    },
  );

  it('needs the ink casing on paper, because some cores alone stand out too little from it', () => {
    for (const key of ['b', 'd', 'e', 'g']) expect(on('paper', `seg-${key}`, 'paper'), key).toBeLessThan(3);
    expect(on('paper', 'casing', 'paper')).toBeGreaterThan(15);
  });

  it('needs a paper halo round red marks on a jacket', () => {
    expect(on('paper', 'red', 'jacket')).toBeLessThan(3);
    expect(on('paper', 'red', 'paper')).toBeGreaterThanOrEqual(4.5);
  });

  it('shows H and an empty core inside a jacket in every theme', () => {
    for (const theme of themes)
      for (const core of ['tracer-h', 'seg-none'])
        expect(on(theme, core, 'jacket'), `${core} in ${theme}`).toBeGreaterThanOrEqual(3);
  });

  it('prints without any colour but grey, unless segments are asked for in colour', () => {
    const grey = (hex: string): boolean =>
      hex.slice(1, 3) === hex.slice(3, 5) && hex.slice(3, 5) === hex.slice(5);
    expect(Object.entries(themeColours('print')).filter(([, hex]) => !grey(hex))).toEqual([]);
    expect(themeColours('print-colour')['seg-a']).toBe(themeColours('paper')['seg-a']);
    expect(themeColours('print-colour')['paper']).toBe('#ffffff');
  });

  it('names the same tokens in every theme, as six-digit colours', () => {
    const names = Object.keys(themeColours('paper'));
    for (const theme of themes) {
      expect(Object.keys(themeColours(theme))).toEqual(names);
      for (const colour of Object.values(themeColours(theme))) expect(colour).toMatch(/^#[0-9a-f]{6}$/);
    }
  });

  it('writes each theme as custom properties under its own selector', () => {
    expect(themeVariables('slate')['--ink']).toBe('#e9ece6');
    const css = themeCss();
    for (const theme of themes) expect(css).toContain(`[data-theme="${theme}"]`);
    expect(css).toContain('--seg-b-on: #17232b;');
  });
});

describe('the palette of a letter', () => {
  it('gives the first eight letters their own and starts again with the ninth', () => {
    expect([...'ABCDEFGH'].map(paletteOf)).toEqual([...paletteKeys]);
    expect(paletteOf('I')).toBe('a');
    expect(paletteOf('Z')).toBe('b');
    expect(paletteOf('AA')).toBe('c');
    expect(paletteOf('AB')).toBe('d');
  });
});
