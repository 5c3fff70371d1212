import { Validator } from '@seriousme/openapi-schema-validator';
import { describe, expect, test } from 'vitest';
import { routes } from '../../../../server/auth/permissions.ts';
import { describeApi, templateOf } from '../../../../server/services/api-description/describe-api.ts';
import { disagreement } from '../../../support/api-witness.ts';

interface Description {
  readonly openapi: string;
  readonly paths: Readonly<Record<string, Readonly<Record<string, { readonly operationId: string }>>>>;
}
const description = describeApi({
  version: '1.2.3',
  publicUrl: 'https://plan.example',
}) as unknown as Description;

describe('the description of the API', () => {
  // OpenAPI Specification 3.1: its own schema, as the package carries it.
  test('is a valid OpenAPI document', async () => {
    const sent = JSON.parse(JSON.stringify(description)) as Parameters<Validator['validate']>[0];
    const result = await new Validator().validate(sent);
    expect(result.errors).toBeUndefined();
    expect(result.valid).toBe(true);
  });

  test('describes every route and no other, each under a name of its own', () => {
    const described = Object.entries(description.paths).flatMap(([path, methods]) =>
      Object.keys(methods).map((method) => `${method.toUpperCase()} ${path}`),
    );
    expect(described.sort()).toEqual(Object.keys(routes).map(templateOf).sort());
    const ids = Object.values(description.paths).flatMap((methods) =>
      Object.values(methods).map(({ operationId }) => operationId),
    );
    expect(new Set(ids).size).toBe(ids.length);
  });
});

describe('the witness of tests', () => {
  const ask = { method: 'GET', path: '/api/workspaces' };
  const json = 'application/json; charset=utf-8';

  test.each([
    [
      'a field that nobody described',
      200,
      '{"workspaces":[],"secret":1}',
      'must NOT have additional properties',
    ],
    ['a missing field', 200, '{}', "must have required property 'workspaces'"],
    ['a status that nobody described', 201, '{"workspaces":[]}', 'no such answer is described'],
    ['a refusal in words of its own', 404, '{"error":"no"}', 'must have required property'],
  ])('tells %s', (_, status, body, said) => {
    expect(disagreement(ask, { status, type: json, body })).toContain(said);
  });

  test('agrees with an answer as it is described', () => {
    expect(disagreement(ask, { status: 200, type: json, body: '{"workspaces":[]}' })).toBeNull();
  });
});
