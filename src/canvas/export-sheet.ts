import type { Decorations } from '../drawing/decorations.ts';
import { sheetSvgText } from '../drawing/svg/sheet-svg.ts';
import { themeVariables } from '../drawing/theme/tokens.ts';
import { tunnelSegments } from '../engine/flood/tunnel-segments.ts';
import type { Design } from '../engine/model/design.ts';
import { indexNetwork } from '../engine/network/index-network.ts';

export interface PictureChoice {
  readonly theme: 'paper' | 'slate' | 'print' | 'print-colour';
  /** Pixels of the picture per pixel of the sheet. */
  readonly scale: number;
  /** Shown on top; leave out for a drawing without findings. */
  readonly decorations?: Decorations;
}

/** A name for a downloaded file: the drawing's number or title, in letters that every system takes. */
export const fileNameOf = (design: Design, ending: string): string => {
  const base = [design.meta.identification, design.meta.title].filter(Boolean).join(' ');
  return `${
    base
      .replace(/[^A-Za-z0-9]+/g, '-')
      .replace(/^-|-$/g, '')
      .toLowerCase() || 'sheet'
  }.${ending}`;
};

/** The design as its own JSON, to be read back in or checked by a script. */
export const designBlob = (design: Design): Blob =>
  new Blob([`${JSON.stringify(design, null, 2)}\n`], { type: 'application/json' });

/** What every picture that leaves says, whatever notes its sheet has. */
const caution =
  'A plan for competent engineers: verify on your equipment and follow your change control. A stretched segment joins failure domains.';
export const cautionHeightPx = 24;

const cautionLine = (theme: PictureChoice['theme']): HTMLElement => {
  const variables = themeVariables(theme);
  const line = document.createElement('div');
  line.textContent = caution;
  line.style.cssText = `height:${cautionHeightPx}px;box-sizing:border-box;padding:2px 32px 0;font:400 12px/18px 'Work Sans',sans-serif;background:${variables['--paper']};color:${variables['--ink-2']}`;
  return line;
};

/** The whole sheet as a PNG, the same whatever is in view: drawn from the model, not photographed. */
export const sheetPng = async (design: Design, choice: PictureChoice): Promise<Blob> => {
  const text = sheetSvgText(design, {
    theme: choice.theme,
    tunnelSegments: tunnelSegments(indexNetwork(design)),
    decorations: choice.decorations,
  });
  const svg = document.importNode(
    new DOMParser().parseFromString(text, 'image/svg+xml').documentElement,
    true,
  );
  const frame = document.createElement('div');
  frame.style.cssText = 'position:fixed;left:0;top:0;z-index:-1;pointer-events:none';
  frame.setAttribute('aria-hidden', 'true');
  const inner = document.createElement('div');
  inner.append(svg, cautionLine(choice.theme));
  frame.append(inner);
  document.body.append(frame);
  try {
    await document.fonts.ready;
    const { toBlob } = await import('html-to-image');
    const blob = await toBlob(inner, { pixelRatio: choice.scale, skipAutoScale: true });
    if (blob === null)
      throw new Error('The browser could not make a picture of this size. Choose a smaller scale.');
    return blob;
  } finally {
    frame.remove();
  }
};
