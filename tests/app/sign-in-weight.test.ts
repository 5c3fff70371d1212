import { existsSync, readFileSync } from 'node:fs';
import { dirname, join, normalize } from 'node:path';
import { expect, test } from 'vitest';

const imported = /^(?:import|export)\s(?!type\b)[^'"]*?['"]([^'"]+)['"]/gms;

/** Everything that is loaded with these modules, packages by name. What is imported when it is needed doesn't count. */
function loadedWith(entries: readonly string[]): ReadonlySet<string> {
  const found = new Set<string>();
  const waiting = [...entries];
  for (let path = waiting.pop(); path !== undefined; path = waiting.pop()) {
    if (found.has(path)) continue;
    found.add(path);
    if (!/\.tsx?$/.test(path) || !existsSync(path)) continue;
    for (const [, target = ''] of readFileSync(path, 'utf8').matchAll(imported)) {
      waiting.push(target.startsWith('.') ? normalize(join(dirname(path), target)) : target);
    }
  }
  return found;
}

test('signing in loads neither the canvas nor the engine nor layout code', () => {
  const loaded = loadedWith(['src/main.tsx', 'src/pages/sign-in-page.tsx']);
  // The walk has to have reached the leaves for its absences to mean anything.
  expect(loaded).toContain('src/features/sign-in/sign-in-form.tsx');
  expect(loaded).toContain('react-hook-form');
  const heavy = [...loaded].filter((path) =>
    /^src\/(canvas|workspace|engine\/(?!model)|drawing\/(routing|tidy|svg|picture))\/|^(@xyflow|elkjs|html-to-image)/.test(
      path,
    ),
  );
  expect(heavy).toEqual([]);
});

test('the list of engagements loads neither the canvas nor the checks', () => {
  const loaded = loadedWith(['src/pages/engagements-page.tsx', 'src/app/shell.tsx']);
  expect(loaded).toContain('src/features/engagements/design-card.tsx');
  expect(
    [...loaded].filter((path) => /^src\/(canvas|workspace|engine\/rules)\/|^@xyflow/.test(path)),
  ).toEqual([]);
});

test('the wire calculator loads neither the canvas nor the checks nor layout code', () => {
  const loaded = loadedWith(['src/main.tsx', 'src/pages/wire-page.tsx', 'src/app/shell.tsx']);
  expect(loaded).toContain('src/engine/wire/stack-layers.ts');
  // How rates and times are written is shared with the sheet's inspector; it draws nothing.
  const inWords = /^src\/canvas\/inspector\/((rate|share|duration)-text|written-value)\.ts$/;
  const heavy =
    /^src\/(canvas|workspace|engine\/(rules|flood|network)|drawing\/(routing|tidy|svg|picture))\/|^(@xyflow|elkjs|html-to-image)/;
  expect([...loaded].filter((path) => heavy.test(path) && !inWords.test(path))).toEqual([]);
});
