import type { FieldSchema } from './api-document.ts';

/** One field of a body or an answer, with how deep it lies. */
export interface FieldRow {
  readonly key: string;
  readonly name: string;
  readonly depth: number;
  readonly required: boolean;
  /** As in 'text, 1 to 80 characters'. */
  readonly words: string;
}

// Deeper than this a list of fields helps nobody; the description itself has all.
const deepest = 3;

const typeWords: Readonly<Record<string, string>> = {
  string: 'text',
  integer: 'whole number',
  number: 'number',
  boolean: 'true or false',
  null: 'null',
  array: 'list',
  object: 'object',
};

const boundWords = (least: number | undefined, most: number | undefined, unit: string): string => {
  // Bounds of the whole numbers that JSON can carry say nothing.
  const from = least === undefined || least <= Number.MIN_SAFE_INTEGER ? undefined : least;
  const to = most === undefined || most >= Number.MAX_SAFE_INTEGER ? undefined : most;
  if (from !== undefined && to !== undefined) return `, ${from} to ${to}${unit}`;
  if (from !== undefined) return `, at least ${from}${unit}`;
  return to === undefined ? '' : `, at most ${to}${unit}`;
};

/** What a value may be, in a few words. */
export const schemaWords = (schema: FieldSchema): string => {
  const choices = schema.anyOf ?? schema.oneOf;
  if (choices !== undefined) return [...new Set(choices.map(schemaWords))].join(' or ');
  if (schema.const !== undefined) return JSON.stringify(schema.const);
  if (schema.enum !== undefined) return schema.enum.map((value) => JSON.stringify(value)).join(', ');
  if (Array.isArray(schema.type)) return schema.type.map((type) => typeWords[String(type)]).join(' or ');
  const type = typeof schema.type === 'string' ? schema.type : undefined;
  if (type === 'array')
    return `list of ${schema.items === undefined ? 'anything' : schemaWords(schema.items)}${boundWords(undefined, schema.maxItems, ' entries')}`;
  if (type === 'string')
    return `${schema.format ?? 'text'}${boundWords(schema.minLength, schema.maxLength, ' characters')}`;
  if (type === 'integer' || type === 'number')
    return `${typeWords[type]}${boundWords(schema.minimum, schema.maximum, '')}`;
  return type === undefined ? 'anything' : (typeWords[type] ?? type);
};

const partsOf = (schema: FieldSchema): readonly FieldSchema[] => {
  const inner = schema.type === 'array' && schema.items !== undefined ? schema.items : schema;
  return inner.anyOf ?? inner.oneOf ?? [inner];
};

/** The fields of a schema in order, those of nested objects under theirs. Alternatives follow one another. */
export const fieldRows = (schema: FieldSchema, depth = 0, path = ''): readonly FieldRow[] =>
  partsOf(schema).flatMap((part, index) =>
    Object.entries(part.properties ?? {}).flatMap(([name, field]) => {
      const key = `${path}/${index}/${name}`;
      const row = {
        key,
        name,
        depth,
        required: part.required?.includes(name) ?? false,
        words: schemaWords(field),
      };
      return depth === deepest ? [row] : [row, ...fieldRows(field, depth + 1, key)];
    }),
  );
