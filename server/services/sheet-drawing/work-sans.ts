import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { EmbeddedFace } from '#drawing/svg/standalone-svg.ts';

const require = createRequire(import.meta.url);
const weights = [400, 500, 600, 700] as const;
export type Weight = (typeof weights)[number];
/** The package cuts each face into files by script; these two are what Western and Central European names need. */
const scripts = ['latin', 'latin-ext'] as const;
export type Script = (typeof scripts)[number];

const ranges = require('@fontsource/work-sans/unicode.json') as { readonly [script in Script]: string };

/** Where a face's file lies. A writer of PDF takes the older format alone: the newer one has glyphs that it can't cut out. */
export function faceFile(weight: Weight, script: Script, format: 'woff' | 'woff2'): string {
  return require.resolve(`@fontsource/work-sans/files/work-sans-${script}-${weight}-normal.${format}`);
}

const beyondLatin = /[\u0100-\u02ff\u1e00-\u1eff]/;

/** The faces that a text needs, as data URLs. */
export function embeddedFaces(text: string): readonly EmbeddedFace[] {
  const needed = beyondLatin.test(text) ? scripts : (['latin'] as const);
  return needed.flatMap((script) =>
    weights.map((weight) => ({
      weight,
      unicodeRange: ranges[script],
      url: `data:font/woff2;base64,${readFileSync(faceFile(weight, script, 'woff2')).toString('base64')}`,
    })),
  );
}
