import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import type { z } from 'zod';
import { collections, designSchema, type Collection } from '../../../src/engine/model/design.ts';

const folder = 'src/canvas/inspector/';
const panelOf: Readonly<Record<Collection | 'meta', string>> = {
  meta: 'design-panel.tsx',
  sites: 'site-panel.tsx',
  devices: 'device-panel.tsx',
  transports: 'transport-panel.tsx',
  links: 'link-panel.tsx',
  endpoints: 'endpoint-panel.tsx',
  associations: 'association-panel.tsx',
  tunnels: 'tunnel-panel.tsx',
  forwarders: 'forwarder-panel.tsx',
  segments: 'segment-panel.tsx',
  demands: 'demand-panel.tsx',
  profiles: 'profile-panel.tsx',
  notes: 'note-panel.tsx',
};

/** A panel's source with that of everything of the inspector that it is made of. */
const sourceOf = (file: string, seen = new Set<string>()): string => {
  seen.add(file);
  const source = readFileSync(folder + file, 'utf8');
  const parts = [...source.matchAll(/from '\.\/([\w-]+\.tsx?)'/g)].flatMap(([, part = '']) =>
    seen.has(part) ? [] : [sourceOf(part, seen)],
  );
  return [source, ...parts].join('\n');
};

/** Paths of every key that a schema's objects may have; '*' stands for an id. */
const pathsIn = (schema: z.core.$ZodType, at: readonly string[] = []): readonly string[] => {
  const { def } = (schema as z.core.$ZodTypes)._zod;
  switch (def.type) {
    case 'object':
      return Object.entries(def.shape).flatMap(([key, part]) => [
        [...at, key].join('.'),
        ...pathsIn(part, [...at, key]),
      ]);
    case 'record':
      return pathsIn(def.valueType, [...at, '*']);
    case 'array':
      return pathsIn(def.element, at);
    case 'optional':
      return pathsIn(def.innerType, at);
    case 'union':
      return def.options.flatMap((option) => pathsIn(option, at));
    case 'string':
    case 'number':
    case 'boolean':
    case 'enum':
    case 'literal':
      return [];
    default:
      throw new Error(`This walk doesn't know what is inside a schema of type ${def.type}.`);
  }
};

const chosenOnTheSheet = 'chosen when it is drawn; to move it, it is drawn anew';
const exceptions: ReadonlyMap<string, string> = new Map([
  ['links.*.kind', 'a cable never becomes a landing'],
  ['links.*.device', chosenOnTheSheet],
  ['links.*.a.device', chosenOnTheSheet],
  ['links.*.b.device', chosenOnTheSheet],
  ['associations.*.a.device', chosenOnTheSheet],
  ['associations.*.b.device', chosenOnTheSheet],
  ['forwarders.*.device', 'its circuits are ports and tunnels of that device'],
  ['notes.*.target.collection', 'chosen with its element in one cell'],
  ['notes.*.target.id', 'chosen with its element in one cell'],
]);

const kinds = ['meta', ...collections] as const;
const fieldsOf = (kind: (typeof kinds)[number]): readonly string[] => [
  ...new Set(pathsIn(designSchema.shape[kind], [kind])),
];

describe('the fields of the model in the inspector', () => {
  it.each(kinds)('has each field of %s named by the panel that shows it', (kind) => {
    const source = sourceOf(panelOf[kind]);
    const unnamed = fieldsOf(kind).filter(
      (path) => !exceptions.has(path) && !source.includes(`'${path.split('.').at(-1)}'`),
    );
    expect(unnamed).toEqual([]);
  });

  it('makes no exception of a field that the model no longer has', () => {
    const fields = new Set(kinds.flatMap(fieldsOf));
    expect([...exceptions.keys()].filter((path) => !fields.has(path))).toEqual([]);
    expect(fields).toContain('associations.*.a.espProposals.*.keyBits');
  });
});
