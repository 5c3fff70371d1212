import { queryOptions } from '@tanstack/react-query';
import { z } from 'zod';
import { callApi } from '../../lib/api-client.ts';

/** A schema as JSON Schema writes it; only what the page shows. */
export interface FieldSchema {
  readonly type?: string | readonly string[] | undefined;
  readonly format?: string | undefined;
  readonly enum?: readonly unknown[] | undefined;
  readonly const?: unknown;
  readonly description?: string | undefined;
  readonly properties?: Readonly<Record<string, FieldSchema>> | undefined;
  readonly required?: readonly string[] | undefined;
  readonly items?: FieldSchema | undefined;
  readonly anyOf?: readonly FieldSchema[] | undefined;
  readonly oneOf?: readonly FieldSchema[] | undefined;
  readonly additionalProperties?: FieldSchema | boolean | undefined;
  readonly minLength?: number | undefined;
  readonly maxLength?: number | undefined;
  readonly minimum?: number | undefined;
  readonly maximum?: number | undefined;
  readonly maxItems?: number | undefined;
}

const schemaSchema = z.custom<FieldSchema>((value) => typeof value === 'object' && value !== null);
const contentSchema = z.record(z.string(), z.object({ schema: schemaSchema })).optional();
const operationSchema = z.object({
  tags: z.array(z.string()),
  operationId: z.string(),
  summary: z.string(),
  description: z.string().optional(),
  parameters: z.array(
    z.object({
      name: z.string(),
      in: z.enum(['path', 'query']),
      required: z.boolean(),
      schema: schemaSchema,
    }),
  ),
  requestBody: z.object({ content: contentSchema }).optional(),
  responses: z.record(z.string(), z.object({ description: z.string(), content: contentSchema })),
  security: z.array(z.record(z.string(), z.array(z.string()))),
  'x-roles': z.array(z.string()).optional(),
});
export type ApiOperation = z.infer<typeof operationSchema>;

const documentSchema = z.object({
  info: z.object({ version: z.string(), description: z.string() }),
  servers: z.array(z.object({ url: z.string() })),
  tags: z.array(z.object({ name: z.string() })),
  paths: z.record(z.string(), z.record(z.string(), operationSchema)),
});

export interface ApiEntry {
  readonly method: string;
  readonly path: string;
  readonly operation: ApiOperation;
}
export interface ApiTopic {
  readonly name: string;
  readonly entries: readonly ApiEntry[];
}

/** Where the description itself can be had. */
export const descriptionPath = '/api/openapi.json';

export const apiDocumentQuery = queryOptions({
  queryKey: ['api-document'],
  queryFn: ({ signal }) => callApi(documentSchema, descriptionPath, { signal }),
  staleTime: Infinity,
});

/** The operations by topic that hold all of some words; topics without any are left out. */
export const topicsOf = (
  { tags, paths }: Pick<z.infer<typeof documentSchema>, 'tags' | 'paths'>,
  words: string,
): readonly ApiTopic[] => {
  const wanted = words.toLowerCase().split(/\s+/).filter(Boolean);
  const entries = Object.entries(paths).flatMap(([path, methods]) =>
    Object.entries(methods).map(([method, operation]): ApiEntry => ({
      method: method.toUpperCase(),
      path,
      operation,
    })),
  );
  return tags
    .map(({ name }) => ({
      name,
      entries: entries.filter(({ method, path, operation: { tags: of, summary, description = '' } }) => {
        const text = `${method} ${path} ${summary} ${description}`.toLowerCase();
        return of.includes(name) && wanted.every((word) => text.includes(word));
      }),
    }))
    .filter(({ entries: left }) => left.length > 0);
};
