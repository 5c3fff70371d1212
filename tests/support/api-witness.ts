import type { IncomingMessage, RequestListener, ServerResponse } from 'node:http';
import type { ValidateFunction } from 'ajv';
import { Ajv2020 } from 'ajv/dist/2020.js';
import addFormats from 'ajv-formats';
import { describeApi } from '../../server/services/api-description/describe-api.ts';

interface Described {
  readonly responses: Readonly<Record<string, { readonly content?: Readonly<Record<string, unknown>> }>>;
}

const description = describeApi({ version: '0', publicUrl: 'http://127.0.0.1' }) as {
  readonly paths: Readonly<Record<string, Readonly<Record<string, Described>>>>;
};
const templates = Object.keys(description.paths).map((template) => ({
  template,
  pattern: new RegExp(`^${template.replace(/[.]/g, '\\.').replace(/\{\w+\}/g, '[^/]+')}$`),
}));

// Formats of zod's schemas are JSON Schema's own; what is not known is said, not passed over.
const ajv = new Ajv2020({ strict: false, allErrors: false });
addFormats.default(ajv);
ajv.addSchema(description, 'api');
const validators = new Map<string, ValidateFunction>();

const pointer = (...keys: readonly string[]): string =>
  keys.map((key) => encodeURIComponent(key.replaceAll('~', '~0').replaceAll('/', '~1'))).join('/');

/** What about an answer is not as the description of the API says; null where all is. */
export function disagreement(
  { method, path }: { readonly method: string; readonly path: string },
  { status, type, body }: { readonly status: number; readonly type: string; readonly body: string },
): string | null {
  const found = templates.find(({ pattern }) => pattern.test(path));
  const described = found && description.paths[found.template]?.[method.toLowerCase()];
  // What is no route is answered with an error, which needs no description.
  if (found === undefined || described === undefined) return null;
  const name = `${method} ${found.template} → ${status}`;
  const key = String(status) in described.responses ? String(status) : 'default';
  if (key === 'default' && status < 400) return `${name}: no such answer is described`;
  const media = Object.keys(described.responses[key]?.content ?? {});
  if (media.length === 0) return body === '' ? null : `${name}: nothing but a status is described`;
  const [mediaType = ''] = media;
  if (!type.startsWith(mediaType)) return `${name}: ${type} instead of ${mediaType}`;
  if (mediaType !== 'application/json') return null;
  const id = `api#/${pointer('paths', found.template, method.toLowerCase(), 'responses', key, 'content', mediaType, 'schema')}`;
  const validate = validators.get(id) ?? ajv.compile({ $ref: id });
  validators.set(id, validate);
  return validate(JSON.parse(body)) ? null : `${name}: ${ajv.errorsText(validate.errors)}`;
}

/** Listens to every answer of a server's API and keeps what the description says otherwise. */
export function witnessed(listener: RequestListener, disagreements: string[]): RequestListener {
  return (req: IncomingMessage, res: ServerResponse) => {
    const path = (req.url ?? '').split('?', 1)[0]!;
    if (path.startsWith('/api/')) {
      const chunks: Buffer[] = [];
      const keep = (chunk: unknown): void => {
        if (typeof chunk === 'string' || chunk instanceof Uint8Array) chunks.push(Buffer.from(chunk));
      };
      const { write, end } = res;
      res.write = (...args: unknown[]) => {
        keep(args[0]);
        return (write as (...all: unknown[]) => boolean).apply(res, args);
      };
      res.end = (...args: unknown[]) => {
        keep(args[0]);
        return (end as (...all: unknown[]) => ServerResponse).apply(res, args);
      };
      res.once('finish', () => {
        const answer = {
          status: res.statusCode,
          type: String(res.getHeader('content-type') ?? ''),
          body: Buffer.concat(chunks).toString('utf8'),
        };
        if (answer.status === 304 || req.method === 'HEAD') return;
        const problem = disagreement({ method: req.method ?? '', path }, answer);
        if (problem !== null) disagreements.push(problem);
      });
    }
    listener(req, res);
  };
}
