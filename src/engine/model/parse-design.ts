import type { z } from 'zod';
import type { Collection, Design } from './design.ts';
import { designFormat, designSchema, entrySchemas } from './design.ts';
import { listReferences, resolves } from './references.ts';
import { upgradeDesign } from './versions.ts';

/** One reason why a document is no design: where, what stands there, what should. */
export interface Problem {
  /** Keys from the document's root, joined by dots. */
  readonly path: string;
  readonly value: string;
  readonly expected: string;
}
export type Parsed<T> =
  { readonly ok: true; readonly value: T } | { readonly ok: false; readonly problems: readonly Problem[] };

const shown = (value: unknown): string => {
  if (value === undefined) return 'nothing';
  const text = JSON.stringify(value) ?? String(value);
  return text.length > 80 ? `${text.slice(0, 77)}…` : text;
};

const valueAt = (root: unknown, path: readonly PropertyKey[]): unknown =>
  path.reduce<unknown>(
    (at, key) =>
      typeof at === 'object' && at !== null && Object.hasOwn(at, key)
        ? (at as Record<PropertyKey, unknown>)[key]
        : undefined,
    root,
  );

type Issue = z.core.$ZodIssue;
const expectedOf = (issue: Issue): string => {
  if (issue.code === 'unrecognized_keys') return `no field called ${issue.keys.join(', ')}`;
  if (issue.code === 'invalid_value')
    return `expected one of ${issue.values.map((value) => JSON.stringify(value)).join(', ')}`;
  if (issue.code === 'invalid_key') return issue.issues[0]?.message ?? issue.message;
  if (issue.code === 'invalid_type' && issue.message.startsWith('Invalid input'))
    return `expected ${issue.expected}`;
  return issue.message;
};

const problemsOf = (root: unknown, issues: readonly Issue[], prefix: readonly string[]): readonly Problem[] =>
  issues.map((issue) => ({
    path: [...prefix, ...issue.path.map(String)].join('.'),
    value: issue.code === 'invalid_key' ? shown(issue.path.at(-1)) : shown(valueAt(root, issue.path)),
    expected: expectedOf(issue),
  }));

/**
 * Reads an unknown JSON value as a design: upgraded from older versions, every problem collected, never half-read.
 * References must lead to something in the document.
 */
export const parseDesign = (input: unknown): Parsed<Design> => {
  const upgraded = upgradeDesign(input);
  if (!upgraded.ok)
    return {
      ok: false,
      problems: [
        { path: 'format', value: shown(valueAt(input, ['format'])), expected: `expected "${designFormat}"` },
      ],
    };
  const result = designSchema.safeParse(upgraded.value, { reportInput: false });
  if (!result.success) return { ok: false, problems: problemsOf(upgraded.value, result.error.issues, []) };
  const problems = referenceProblems(result.data);
  return problems.length > 0 ? { ok: false, problems } : { ok: true, value: result.data };
};

/** The references of a well-formed design that lead nowhere, as problems. */
export const referenceProblems = (design: Design): readonly Problem[] =>
  listReferences(design)
    .filter((reference) => !resolves(design, reference))
    .map((reference) => ({
      path: reference.path.join('.'),
      value: shown(reference.port === undefined ? reference.id : `${reference.id}, port ${reference.port}`),
      expected: `expected ${reference.port === undefined ? 'an id that exists in' : 'a port of a device in'} ${reference.target}`,
    }));

/** Checks one entry alone, without looking at what it refers to: what a form needs while somebody types. */
export const parseEntry = (collection: Collection, id: string, entry: unknown): readonly Problem[] => {
  const result = entrySchemas[collection].safeParse(entry);
  return result.success ? [] : problemsOf(entry, result.error.issues, [collection, id]);
};

/**
 * Problems in the parts of a design that a patch changed, checked against the document before it: entries that kept
 * their identity are not looked at again. References are not followed (see danglingPatch).
 */
export const changedProblems = (before: Design, after: Design): readonly Problem[] => {
  const problems: Problem[] = [];
  for (const key of new Set([...Object.keys(before), ...Object.keys(after)])) {
    const now = (after as unknown as Record<string, unknown>)[key];
    const was = (before as unknown as Record<string, unknown>)[key];
    if (now === was) continue;
    if (!Object.hasOwn(designSchema.shape, key)) {
      problems.push({ path: key, value: shown(now), expected: `no field called ${key}` });
    } else if (
      Object.hasOwn(entrySchemas, key) &&
      typeof now === 'object' &&
      now !== null &&
      !Array.isArray(now)
    ) {
      for (const [id, entry] of Object.entries(now)) {
        if (
          typeof was === 'object' &&
          was !== null &&
          Object.hasOwn(was, id) &&
          (was as Record<string, unknown>)[id] === entry
        )
          continue;
        const keyResult = designSchema.shape[key as Collection].safeParse({ [id]: entry });
        if (!keyResult.success) problems.push(...problemsOf({ [id]: entry }, keyResult.error.issues, [key]));
      }
    } else {
      const shape = designSchema.shape[key as keyof typeof designSchema.shape] as z.ZodType;
      const result = shape.safeParse(now);
      if (!result.success) problems.push(...problemsOf(now, result.error.issues, [key]));
    }
  }
  return problems;
};
