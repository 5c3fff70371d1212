import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { hasExtendedLatin, latinRanges } from '#drawing/picture/latin-ranges.ts';
import type { EmbeddedFace } from '#drawing/svg/standalone-svg.ts';

const require = createRequire(import.meta.url);
const weights = [400, 500, 600, 700] as const;
export type Weight = (typeof weights)[number];
/** The package cuts each face into files by script; these two are what Western and Central European names need. */
const scripts = ['latin', 'latin-ext'] as const;
export type Script = (typeof scripts)[number];

/** Where a face's file lies. A writer of PDF takes the older format alone: the newer one has glyphs that it can't cut out. */
export function faceFile(weight: Weight, script: Script, format: 'woff' | 'woff2'): string {
  return require.resolve(`@fontsource/work-sans/files/work-sans-${script}-${weight}-normal.${format}`);
}

/** The faces that a text needs, as data URLs. */
export function embeddedFaces(text: string): readonly EmbeddedFace[] {
  const needed = hasExtendedLatin(text) ? scripts : (['latin'] as const);
  return needed.flatMap((script) =>
    weights.map((weight) => ({
      weight,
      unicodeRange: latinRanges[script],
      url: `data:font/woff2;base64,${readFileSync(faceFile(weight, script, 'woff2')).toString('base64')}`,
    })),
  );
}
