import type { Shape, ShapeAttributes } from '../shape.ts';
import { themeColours } from '../theme/tokens.ts';
import type { Theme } from '../theme/tokens.ts';

/** SVG attributes that keep their capitals; all others are written with dashes. */
const capitalised = new Set(['viewBox', 'preserveAspectRatio', 'textLength', 'lengthAdjust', 'pathLength']);

const attributeName = (name: string): string => {
  if (name === 'className') return 'class';
  return capitalised.has(name) ? name : name.replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`);
};

// XML 1.0, 2.2: most control characters and lone surrogates may not stand in a document at all.
const forbidden =
  /[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]|[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/g; // eslint-disable-line no-control-regex

/** Text as it may stand in element content and in attributes in double quotes. */
export const escapeXml = (text: string): string =>
  text
    .replace(forbidden, '\ufffd')
    .replace(/&/g, '&amp;')
    .replace(/</g, '&lt;')
    .replace(/>/g, '&gt;')
    .replace(/"/g, '&quot;');

type Colours = Readonly<Record<string, string>> | undefined;

/** Replaces every `var(--token)` by the theme's colour, so that the file stands alone. */
const inlined = (value: string, colours: Colours): string =>
  colours === undefined
    ? value
    : value.replace(/var\(--([a-z0-9-]+)\)/g, (whole, name: string) => colours[name] ?? whole);

const attributes = (attrs: ShapeAttributes, colours: Colours): string =>
  Object.entries(attrs)
    .filter(([, value]) => value !== undefined)
    .map(([name, value]) => ` ${attributeName(name)}="${escapeXml(inlined(String(value), colours))}"`)
    .join('');

const write = (shape: Shape, colours: Colours): string => {
  const open = `<${shape.el}${attributes(shape.attrs, colours)}`;
  const children = shape.children ?? [];
  if (children.length === 0) return `${open}/>`;
  const inside = children
    .map((child) => (typeof child === 'string' ? escapeXml(child) : write(child, colours)))
    .join('');
  return `${open}>${inside}</${shape.el}>`;
};

/** Shapes as SVG text; with a theme its colours are written in, without one they stay custom properties. */
export const toSvgText = (shapes: readonly Shape[], theme?: Theme): string => {
  const colours = theme === undefined ? undefined : themeColours(theme);
  return shapes.map((shape) => write(shape, colours)).join('');
};
