import type { Shape, ShapeAttributes } from '../shape.ts';
import type { Theme } from '../theme/tokens.ts';
import { themeColours } from '../theme/tokens.ts';

export type Colours = Readonly<Record<string, string>>;

/**
 * The colours of a picture that leaves: the theme's, with the blue pencil turned to ink. What it still would draw then, such
 * as the leader of a cord that finds no way, is part of the design.
 */
export const pictureColours = (look: Theme): Colours => {
  const colours = themeColours(look);
  const [ink, paper] = [colours['ink-2'] ?? '', colours['paper'] ?? ''];
  return { ...colours, blue: ink, 'blue-soft': paper, 'blue-wash': paper, 'blue-ink': paper };
};

const channels = (colour: string): readonly number[] =>
  [1, 3, 5].map((start) => Number.parseInt(colour.slice(start, start + 2), 16));

/** So much of each colour and the rest of the paper's: what is faded stays opaque, for programs and printers alike. */
export const fadedColours = (colours: Colours, share: number): Colours => {
  const paper = channels(colours['paper'] ?? '#ffffff');
  return Object.fromEntries(
    Object.entries(colours).map(([name, colour]) => [
      name,
      `#${channels(colour)
        .map((value, i) => Math.round(value * share + (paper[i] ?? 255) * (1 - share)))
        .map((value) => value.toString(16).padStart(2, '0'))
        .join('')}`,
    ]),
  );
};

/** A shape with every `var(--token)` replaced by its colour, so that it stands without a stylesheet. */
export const withColours = (shape: Shape, colours: Colours): Shape => ({
  ...shape,
  attrs: Object.fromEntries(
    Object.entries(shape.attrs).map(([name, value]) => [
      name,
      typeof value === 'string' && value.startsWith('var(--')
        ? (colours[value.slice('var(--'.length, -1)] ?? value)
        : value,
    ]),
  ) satisfies ShapeAttributes,
  ...(shape.children === undefined
    ? {}
    : {
        children: shape.children.map((child) =>
          typeof child === 'string' ? child : withColours(child, colours),
        ),
      }),
});
