import type { Rect } from '../../drawing/geometry.ts';

/** What browsers of today draw without failing: a side, and all of it at four bytes a pixel. */
const mostSidePx = 16_000;
const mostPixels = 130_000_000;

export interface PngExtent {
  readonly width: number;
  readonly height: number;
  readonly tooLarge: boolean;
}

export const pngExtent = (box: Rect, scale: number): PngExtent => {
  const [width, height] = [Math.round(box.width * scale), Math.round(box.height * scale)];
  return {
    width,
    height,
    tooLarge: Math.max(width, height) > mostSidePx || width * height > mostPixels,
  };
};

const noPicture = 'The browser could not make a picture of this size. Choose a smaller scale, or PDF.';

/** An SVG that needs nothing else as a PNG of so many pixels. */
export const pictureSvgToPng = async (
  svg: string,
  { width, height }: Pick<PngExtent, 'width' | 'height'>,
  signal: AbortSignal,
): Promise<Blob> => {
  const url = URL.createObjectURL(new Blob([svg], { type: 'image/svg+xml' }));
  try {
    const image = new Image();
    image.src = url;
    await image.decode();
    signal.throwIfAborted();
    const canvas = document.createElement('canvas');
    canvas.width = width;
    canvas.height = height;
    const context = canvas.getContext('2d');
    if (context === null) throw new Error(noPicture);
    context.drawImage(image, 0, 0, width, height);
    const blob = await new Promise<Blob | null>((resolve) => canvas.toBlob(resolve, 'image/png'));
    signal.throwIfAborted();
    if (blob === null) throw new Error(noPicture);
    return blob;
  } finally {
    URL.revokeObjectURL(url);
  }
};
