import latinExtended400 from '@fontsource/work-sans/files/work-sans-latin-ext-400-normal.woff2?url';
import latinExtended500 from '@fontsource/work-sans/files/work-sans-latin-ext-500-normal.woff2?url';
import latinExtended600 from '@fontsource/work-sans/files/work-sans-latin-ext-600-normal.woff2?url';
import latinExtended700 from '@fontsource/work-sans/files/work-sans-latin-ext-700-normal.woff2?url';
import latin400 from '@fontsource/work-sans/files/work-sans-latin-400-normal.woff2?url';
import latin500 from '@fontsource/work-sans/files/work-sans-latin-500-normal.woff2?url';
import latin600 from '@fontsource/work-sans/files/work-sans-latin-600-normal.woff2?url';
import latin700 from '@fontsource/work-sans/files/work-sans-latin-700-normal.woff2?url';
import { hasExtendedLatin, latinRanges } from '../../drawing/picture/latin-ranges.ts';
import type { EmbeddedFace } from '../../drawing/svg/standalone-svg.ts';

const files = {
  latin: { 400: latin400, 500: latin500, 600: latin600, 700: latin700 },
  'latin-ext': { 400: latinExtended400, 500: latinExtended500, 600: latinExtended600, 700: latinExtended700 },
} as const;
type Script = keyof typeof files;

const asDataUrl = async (file: string): Promise<string> => {
  const answer = await fetch(file);
  if (!answer.ok) throw new Error('The font can’t be fetched. Check your connection and try again.');
  const bytes = new Uint8Array(await answer.arrayBuffer());
  let text = '';
  for (const byte of bytes) text += String.fromCharCode(byte);
  return `data:font/woff2;base64,${btoa(text)}`;
};

const loaded = new Map<Script, Promise<readonly EmbeddedFace[]>>();

const facesOf = (script: Script): Promise<readonly EmbeddedFace[]> => {
  const known = loaded.get(script);
  if (known !== undefined) return known;
  const faces = Promise.all(
    Object.entries(files[script]).map(async ([weight, file]) => ({
      weight: Number(weight),
      unicodeRange: latinRanges[script],
      url: await asDataUrl(file),
    })),
  );
  loaded.set(script, faces);
  // What failed once may be had the next time.
  faces.catch(() => loaded.delete(script));
  return faces;
};

/** The faces of Work Sans that a text needs, as data URLs; fetched once. */
export const browserFaces = async (text: string): Promise<readonly EmbeddedFace[]> => [
  ...(await facesOf('latin')),
  ...(hasExtendedLatin(text) ? await facesOf('latin-ext') : []),
];
