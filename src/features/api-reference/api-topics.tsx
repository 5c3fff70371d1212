import { Icon } from '../../components/icon.tsx';
import { roleWords } from '../../lib/role-words.ts';
import type { ApiEntry, ApiTopic, FieldSchema } from './api-document.ts';
import { curlOf } from './curl-line.ts';
import { fieldRows, schemaWords } from './field-rows.ts';

/** Routes by topic; each opens to what it takes and answers. */
export function ApiTopics({
  topics,
  origin,
}: {
  readonly topics: readonly ApiTopic[];
  readonly origin: string;
}) {
  return topics.map(({ name, entries }) => (
    <section key={name} aria-label={name} className="mb-20">
      <h2 className="mb-6 text-section font-semibold">{name}</h2>
      <ul className="border border-rule-strong bg-field">
        {entries.map((entry) => (
          <li
            key={entry.operation.operationId}
            id={entry.operation.operationId}
            className="scroll-mt-14 border-t border-rule-2 first:border-t-0 target:bg-blue-wash"
          >
            <Entry entry={entry} origin={origin} />
          </li>
        ))}
      </ul>
    </section>
  ));
}

function Entry({ entry, origin }: { readonly entry: ApiEntry; readonly origin: string }) {
  const { method, path, operation } = entry;
  const body = operation.requestBody?.content?.['application/json']?.schema;
  const [status, answer] = Object.entries(operation.responses).find(([key]) => key !== 'default') ?? [];
  const [mediaType, content] = Object.entries(answer?.content ?? {})[0] ?? [];
  const query = operation.parameters.filter((parameter) => parameter.in === 'query');
  return (
    <details className="group">
      <summary className="flex min-h-34 cursor-pointer flex-wrap items-center gap-x-14 px-14 py-6 marker:content-['']">
        <Icon name="chevron-down" size={12} className="-rotate-90 group-open:rotate-0" />
        <span className="w-54 font-semibold">{method}</span>
        <span className="min-w-0 flex-1 basis-320 font-semibold break-all">{path}</span>
        <span className="min-w-0 flex-1 basis-240 text-ink-2">{operation.summary}</span>
      </summary>
      <div className="grid gap-14 px-40 pt-2 pb-16 max-sm:px-14">
        {operation.description !== undefined && (
          <p className="max-w-720 text-ink-2">{operation.description}</p>
        )}
        <p className="text-note text-ink-2">{whoWords(entry)}</p>
        {query.length > 0 && (
          <Fields
            title="In the query"
            schema={{
              properties: Object.fromEntries(query.map(({ name, schema }) => [name, schema])),
              required: query.filter(({ required }) => required).map(({ name }) => name),
            }}
          />
        )}
        {body !== undefined && <Fields title="Takes" schema={body} />}
        {mediaType === 'application/json' && content !== undefined ? (
          <Fields title={`Answers ${status}`} schema={content.schema} />
        ) : (
          <p>
            <span className="text-label text-ink-3">Answers {status}</span>
            <br />
            {mediaType ?? 'nothing else'}
          </p>
        )}
        <pre className="border border-rule-2 bg-panel px-12 py-8 text-note break-all whitespace-pre-wrap">
          <code>{curlOf(entry, origin)}</code>
        </pre>
      </div>
    </details>
  );
}

const isRole = (role: string): role is keyof typeof roleWords => Object.hasOwn(roleWords, role);

const whoWords = ({ operation: { security, 'x-roles': roles } }: ApiEntry): string => {
  const withToken = security.some((each) => 'token' in each) ? ', with a token too' : '';
  if (security.length === 0) return 'Answers everybody.';
  if (roles === undefined) return `Answers whoever is signed in${withToken}.`;
  const names = roles.filter(isRole).map((role) => roleWords[role]);
  return `Answers these roles in the workspace: ${names.join(', ')}${withToken}.`;
};

function Fields({ title, schema }: { readonly title: string; readonly schema: FieldSchema }) {
  const rows = fieldRows(schema);
  return (
    <div>
      <h3 className="text-label text-ink-3">{title}</h3>
      {rows.length === 0 ? (
        <p>{schemaWords(schema)}</p>
      ) : (
        <ul>
          {rows.map(({ key, name, depth, required, words }) => (
            <li
              key={key}
              className="flex flex-wrap gap-x-12 border-t border-rule-2 py-2 first:border-t-0"
              style={{ paddingLeft: depth * 18 }}
            >
              <span className="w-180 font-semibold break-all">
                {name}
                {!required && <span className="font-normal text-ink-3">, optional</span>}
              </span>
              <span className="min-w-0 flex-1 basis-200 text-ink-2">{words}</span>
            </li>
          ))}
        </ul>
      )}
    </div>
  );
}
