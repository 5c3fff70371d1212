import { caution } from '../../drawing/picture/caution-line.ts';
import { fontFaceRules } from '../../drawing/svg/standalone-svg.ts';
import { browserFaces } from './browser-faces.ts';

const stripPx = 24;
const textPx = 12;

/** What the reader sees of the sheet just now. */
const canvasOnScreen = (): HTMLElement => {
  const shown = document.querySelector<HTMLElement>('.sheet-canvas .react-flow');
  if (shown === null) throw new Error('No sheet is on screen.');
  return shown;
};

/** Pixels of a picture of what is on screen, with the line of caution under it. */
export const screenExtent = (scale: number): { readonly width: number; readonly height: number } => {
  const { clientWidth, clientHeight } = canvasOnScreen();
  return { width: clientWidth * scale, height: (clientHeight + stripPx) * scale };
};

/** A picture of what is on screen, with selection, results and all, and the line of caution under it. */
export const screenPng = async (scale: number, signal: AbortSignal): Promise<Blob> => {
  const shown = canvasOnScreen();
  const styles = getComputedStyle(shown);
  const [paper, ink] = ['--paper', '--ink-2'].map((name) => styles.getPropertyValue(name).trim());
  // The one library for it, fetched only here: the sheet itself is drawn from the model.
  const { toCanvas } = await import('html-to-image');
  const picture = await toCanvas(shown, {
    pixelRatio: scale,
    skipAutoScale: true,
    // Left to itself it reads every stylesheet for fonts, and needs a policy looser than ours for it.
    fontEmbedCSS: fontFaceRules(await browserFaces(shown.textContent)),
    backgroundColor: styles.getPropertyValue('--desk').trim(),
  });
  signal.throwIfAborted();
  const { width, height } = screenExtent(scale);
  const whole = document.createElement('canvas');
  whole.width = width;
  whole.height = height;
  const context = whole.getContext('2d');
  if (context === null) throw new Error('The browser could not make a picture. Choose a smaller scale.');
  context.fillStyle = paper ?? '#ffffff';
  context.fillRect(0, 0, width, height);
  context.drawImage(picture, 0, 0);
  context.fillStyle = ink ?? '#000000';
  context.font = `${textPx * scale}px 'Work Sans', sans-serif`;
  context.textBaseline = 'middle';
  // Narrower letters rather than lost words where the screen is narrow.
  context.fillText(caution, 14 * scale, height - (stripPx / 2) * scale, width - 28 * scale);
  const blob = await new Promise<Blob | null>((resolve) => whole.toBlob(resolve, 'image/png'));
  signal.throwIfAborted();
  if (blob === null) throw new Error('The browser could not make a picture. Choose a smaller scale.');
  return blob;
};
