import { ErrorNotice } from '../../components/notice.tsx';
import type { Problem } from '../../lib/api-error.ts';

/** Everything that keeps a file from being a design: where in it, what stands there, what was expected. */
export function DocumentProblems({
  problems,
  message,
}: {
  readonly problems: readonly Problem[];
  readonly message: string;
}) {
  return (
    <div className="mt-14">
      <ErrorNotice>
        {problems.length === 0
          ? message
          : `Nothing was imported: ${problems.length === 1 ? 'one thing' : `${problems.length} things`} in the file ${problems.length === 1 ? 'needs' : 'need'} mending.`}
      </ErrorNotice>
      {problems.length > 0 && (
        <ol
          aria-label="What needs mending"
          // A long list scrolls, so it has to be reachable by keyboard.
          // eslint-disable-next-line jsx-a11y/no-noninteractive-tabindex
          tabIndex={0}
          className="mt-8 max-h-220 overflow-y-auto border border-rule-strong bg-field"
        >
          {problems.map(({ path, value, expected }) => (
            <li key={`${path} ${expected}`} className="border-t border-rule px-10 py-6 first:border-t-0">
              <p className="font-medium break-all">{path === '' ? 'The whole document' : path}</p>
              <p className="break-words text-ink-2">
                {value !== '' && <span className="text-red">{value}</span>}
                {value !== '' && ': '}
                {expected}
              </p>
            </li>
          ))}
        </ol>
      )}
    </div>
  );
}
