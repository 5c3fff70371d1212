import type { Decorations } from '../drawing/decorations.ts';
import { pictureSvgText } from '../drawing/picture/picture-svg.ts';
import { sheetPicture } from '../drawing/picture/sheet-picture.ts';
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

/** The whole sheet as a PNG, the same whatever is in view: drawn from the model, not photographed. */
export const sheetPng = async (design: Design, choice: PictureChoice): Promise<Blob> => {
  const picture = sheetPicture(design, {
    look: choice.theme,
    tunnelSegments: tunnelSegments(indexNetwork(design)),
    ...(choice.decorations === undefined ? {} : { decorations: choice.decorations }),
  });
  const svg = document.importNode(
    new DOMParser().parseFromString(pictureSvgText(picture), 'image/svg+xml').documentElement,
    true,
  );
  svg.setAttribute('width', String(picture.box.width));
  svg.setAttribute('height', String(picture.box.height));
  const frame = document.createElement('div');
  frame.style.cssText = 'position:fixed;left:0;top:0;z-index:-1;pointer-events:none';
  frame.setAttribute('aria-hidden', 'true');
  const inner = document.createElement('div');
  inner.append(svg);
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
