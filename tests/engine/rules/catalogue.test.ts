import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { collections } from '#engine/model/design.ts';
import { rules } from '#engine/rules/index.ts';
import { ruleReference, sourceText } from '#engine/rules/rule-reference.ts';

const folder = new URL('../../../src/engine/rules/', import.meta.url);
const tests = new URL('./', import.meta.url);
const ruleFiles = readdirSync(folder)
  .filter((file) => readFileSync(new URL(file, folder), 'utf8').includes('= defineRule({'))
  .map((file) => file.replace(/\.ts$/, ''));
const camelCase = (id: string): string => id.replace(/-(.)/g, (_, letter: string) => letter.toUpperCase());

describe('the catalogue of checks', () => {
  it('holds every rule file once', () => {
    expect(rules.map((rule) => rule.id).sort()).toEqual(ruleFiles.sort());
  });

  it.each(rules.map((rule) => [rule.id, rule] as const))('%s is complete', async (id, rule) => {
    expect(id).toMatch(/^[a-z0-9]+(-[a-z0-9]+)+$/);
    const module = (await import(new URL(`${id}.ts`, folder).href)) as Record<string, unknown>;
    expect(module[camelCase(id)], `the export ${camelCase(id)}`).toBe(rule);
    expect(existsSync(new URL(`${id}.test.ts`, tests)), `a test file for ${id}`).toBe(true);
    expect(rule.title).toMatch(/^[A-Z].*[^.]$/);
    for (const text of [rule.why, rule.seen]) expect(text).toMatch(/^[A-Z0-9].*\.$/);
    expect(rule.sources.length).toBeGreaterThan(0);
    for (const source of rule.sources) expect(sourceText(source).length).toBeGreaterThan(3);
    expect(rule.messages.length).toBeGreaterThan(0);
    for (const { words } of rule.messages) expect(words).toMatch(/^\S.*[^.]$/);
    expect(new Set(rule.looksAt).size).toBe(rule.looksAt.length);
    for (const collection of rule.looksAt) expect(['meta', ...collections]).toContain(collection);
  });

  it('is told whole by the reference, in order of id', () => {
    const reference = ruleReference();
    expect(reference.map((entry) => entry.id)).toEqual(rules.map((rule) => rule.id).sort());
    expect(JSON.parse(JSON.stringify(reference))).toEqual(reference);
  });
});
