import { z } from 'zod';
import { errorSchema } from '#contract/errors.ts';
import { designSchema } from '#engine/model/design.ts';
import type { Access, Route } from '../../auth/permissions.ts';
import { isOpenToToken, permissions, routes } from '../../auth/permissions.ts';
import type { Operation } from './operation.ts';
import { operationsByTopic, topics } from './operations.ts';

type Json = { readonly [key: string]: unknown };

/** Every route as a document by the OpenAPI Specification 3.1.1, made from the schemas that the server reads and answers by. */
export function describeApi({ version, publicUrl }: { version: string; publicUrl: string }): Json {
  const paths: Record<string, Record<string, Json>> = {};
  for (const { topic, route, operation } of operationsByTopic) {
    const [method, path] = route.split(' ') as [string, string];
    (paths[templateOf(path)] ??= {})[method.toLowerCase()] = describeOperation(route, topic, operation);
  }
  return {
    openapi: '3.1.1',
    info: {
      title: 'Longpatch',
      version,
      description:
        'Plans of layer-2 overlays: engagements, designs, their checks and their review. Scripts send a personal token; browsers have a session.',
    },
    servers: [{ url: publicUrl }],
    tags: Object.keys(topics).map((name) => ({ name })),
    paths,
    components: {
      schemas: {
        Error: schemaOf(errorSchema, 'output'),
        Design: schemaOf(designSchema, 'input'),
      },
      securitySchemes: {
        token: { type: 'http', scheme: 'bearer', description: 'A personal token, made under Account.' },
        session: {
          type: 'apiKey',
          in: 'cookie',
          name: 'longpatch',
          description:
            "A browser's session; changing requests carry its token in X-CSRF-Token. Under https the cookie is __Host-longpatch.",
        },
      },
    },
  };
}

/** OpenAPI 3.1.1 section 4.8.8.2: path templating in braces. */
export function templateOf(path: string): string {
  return path.replace(/:(\w+)/g, '{$1}');
}

function describeOperation(route: Route, topic: string, operation: Operation): Json {
  const { summary, description, query, body, answer } = operation;
  const status = String(answer.status ?? 200);
  return {
    tags: [topic],
    operationId: operationIdOf(route),
    summary,
    ...(description === undefined ? {} : { description }),
    parameters: [...pathParameters(route), ...(query === undefined ? [] : queryParameters(query))],
    ...(body === undefined
      ? {}
      : { requestBody: { required: true, content: jsonOf(schemaOf(body, 'input')) } }),
    responses: {
      [status]: {
        description: summary,
        ...('schema' in answer ? { content: jsonOf(schemaOf(answer.schema, 'output')) } : {}),
        ...('mediaType' in answer ? { content: { [answer.mediaType]: { schema: { type: 'string' } } } } : {}),
      },
      default: {
        description: 'Refused: why, and the fields at fault where there are any',
        content: jsonOf({ $ref: '#/components/schemas/Error' }),
      },
    },
    security: securityOf(route),
    'x-roles': rolesOf(route),
  };
}

/** Such as `getDesignsPatches`; each names one route. */
function operationIdOf(route: Route): string {
  const [method, path] = route.split(' ') as [string, string];
  const words = path
    .replace(/^\/api\//, '')
    .split(/[/.-]/)
    .map((word) => (word.startsWith(':') ? `by-${word.slice(1)}` : word))
    .flatMap((word) => word.split('-'));
  return method.toLowerCase() + words.map((word) => word.charAt(0).toUpperCase() + word.slice(1)).join('');
}

const pathParameters = (route: Route): readonly Json[] =>
  [...route.matchAll(/:(\w+)/g)].map(([, name]) => ({
    name,
    in: 'path',
    required: true,
    schema: { type: 'string', format: 'uuid' },
  }));

function queryParameters(query: z.ZodType): readonly Json[] {
  const { properties = {}, required = [] } = schemaOf(query, 'input') as {
    properties?: Record<string, Json>;
    required?: readonly string[];
  };
  return Object.entries(properties).map(([name, schema]) => ({
    name,
    in: 'query',
    required: required.includes(name),
    schema,
  }));
}

const jsonOf = (schema: Json): Json => ({ 'application/json': { schema } });

function schemaOf(schema: z.ZodType, io: 'input' | 'output'): Json {
  // OpenAPI 3.1.1 section 4.8.24: its schemas are those of JSON Schema, draft 2020-12.
  const { $schema: _, ...rest } = z.toJSONSchema(schema, {
    target: 'draft-2020-12',
    io,
    unrepresentable: 'any',
    reused: 'inline',
  });
  return rest;
}

function securityOf(route: Route): readonly Json[] {
  const access: Access = routes[route];
  if (access === 'anyone') return [];
  const session = { session: [] };
  return isOpenToToken(route, 'write') ? [{ token: [] }, session] : [session];
}

/** Which roles are answered; absent where no membership is asked for. */
function rolesOf(route: Route): readonly string[] | undefined {
  const access: Access = routes[route];
  if (access === 'anyone' || access === 'signed-in') return undefined;
  return Object.entries(permissions)
    .filter(([, actions]) => actions.includes(access))
    .map(([role]) => role);
}
