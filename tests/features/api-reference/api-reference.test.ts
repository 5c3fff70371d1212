import { describe, expect, test } from 'vitest';
import type { ApiOperation } from '../../../src/features/api-reference/api-document.ts';
import { topicsOf } from '../../../src/features/api-reference/api-document.ts';
import { curlOf } from '../../../src/features/api-reference/curl-line.ts';
import { fieldRows, schemaWords } from '../../../src/features/api-reference/field-rows.ts';

const operation = (overrides: Partial<ApiOperation> = {}): ApiOperation => ({
  tags: ['Designs'],
  operationId: 'x',
  summary: 'Save edits',
  parameters: [],
  responses: {},
  security: [{ token: [] }],
  ...overrides,
});

describe('routes by topic', () => {
  const description = {
    tags: [{ name: 'Designs' }, { name: 'Engine' }],
    paths: {
      '/api/designs/{designId}': { get: operation({ summary: 'Open a design' }), patch: operation() },
      '/api/engine/check': { post: operation({ tags: ['Engine'], summary: 'Check a design' }) },
    },
  };

  test('stand in the order of the topics', () => {
    expect(
      topicsOf(description, '').map(({ name, entries }) => [name, entries.map(({ method }) => method)]),
    ).toEqual([
      ['Designs', ['GET', 'PATCH']],
      ['Engine', ['POST']],
    ]);
  });

  test('are found by method, path and words, all of them', () => {
    expect(topicsOf(description, 'design check').map(({ name }) => name)).toEqual(['Engine']);
    expect(topicsOf(description, 'PATCH designs')[0]!.entries).toHaveLength(1);
    expect(topicsOf(description, 'nothing')).toEqual([]);
  });
});

describe('fields', () => {
  test('say what a value may be', () => {
    expect(schemaWords({ type: 'string', minLength: 1, maxLength: 80 })).toBe('text, 1 to 80 characters');
    expect(schemaWords({ type: 'integer', minimum: 0, maximum: Number.MAX_SAFE_INTEGER })).toBe(
      'whole number, at least 0',
    );
    expect(schemaWords({ anyOf: [{ type: 'string', format: 'date-time' }, { type: 'null' }] })).toBe(
      'date-time or null',
    );
    expect(schemaWords({ enum: ['paper', 'slate'] })).toBe('"paper", "slate"');
    expect(schemaWords({})).toBe('anything');
  });

  test('stand under the field that they belong to, those of lists too', () => {
    const rows = fieldRows({
      type: 'object',
      required: ['edits'],
      properties: {
        edits: {
          type: 'array',
          maxItems: 1000,
          items: { type: 'object', required: ['patch'], properties: { patch: { type: 'object' } } },
        },
        note: { type: 'string' },
      },
    });
    expect(rows.map(({ name, depth, required, words }) => [name, depth, required, words])).toEqual([
      ['edits', 0, true, 'list of object, at most 1000 entries'],
      ['patch', 1, true, 'object'],
      ['note', 0, false, 'text'],
    ]);
    expect(new Set(rows.map(({ key }) => key)).size).toBe(rows.length);
  });
});

test('a request is written as one would type it', () => {
  const body = {
    type: 'object',
    required: ['baseSequence', 'title'],
    properties: { baseSequence: { type: 'integer', minimum: 0 }, title: { type: 'string' } },
  };
  const entry = {
    method: 'POST',
    path: '/api/designs/{designId}/patches',
    operation: operation({ requestBody: { content: { 'application/json': { schema: body } } } }),
  };
  expect(curlOf(entry, 'https://plan.example')).toBe(
    [
      `curl -X POST 'https://plan.example/api/designs/{designId}/patches' \\`,
      `  -H "Authorization: Bearer $TOKEN" \\`,
      `  -H 'Content-Type: application/json' \\`,
      `  -d '{"baseSequence":0,"title":"…"}'`,
    ].join('\n'),
  );
});
