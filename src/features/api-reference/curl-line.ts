import type { ApiEntry, FieldSchema } from './api-document.ts';

/** A value that fits a schema well enough to be written over. */
const exampleOf = (schema: FieldSchema): unknown => {
  const [choice] = schema.anyOf ?? schema.oneOf ?? [];
  if (choice !== undefined) return exampleOf(choice);
  if (schema.const !== undefined) return schema.const;
  if (schema.enum !== undefined) return schema.enum[0];
  switch (schema.type) {
    case 'object':
      return Object.fromEntries(
        (schema.required ?? []).map((name) => [name, exampleOf(schema.properties?.[name] ?? {})]),
      );
    case 'array':
      return [];
    case 'integer':
    case 'number':
      return schema.minimum !== undefined && schema.minimum > 0 ? schema.minimum : 0;
    case 'boolean':
      return true;
    case 'string':
      return '…';
    default:
      return {};
  }
};

/** The request on a command line, with what one has to write in its place. */
export const curlOf = ({ method, path, operation }: ApiEntry, origin: string): string => {
  const body = operation.requestBody?.content?.['application/json']?.schema;
  const query = operation.parameters
    .filter((parameter) => parameter.in === 'query' && parameter.required)
    .map(({ name }) => `${name}=…`)
    .join('&');
  return [
    `curl${method === 'GET' ? '' : ` -X ${method}`} '${origin}${path}${query === '' ? '' : `?${query}`}'`,
    ...(operation.security.some((each) => 'token' in each) ? [`-H "Authorization: Bearer $TOKEN"`] : []),
    ...(body === undefined
      ? []
      : [`-H 'Content-Type: application/json'`, `-d '${JSON.stringify(exampleOf(body))}'`]),
  ].join(' \\\n  ');
};
