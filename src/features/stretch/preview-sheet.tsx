import { ErrorNotice } from '../../components/notice.tsx';
import { SeverityCounts, SeverityShape } from '../../components/severity-mark.tsx';
import { Shapes } from '../../components/shapes.tsx';
import { rules } from '../../engine/rules/index.ts';
import { countBySeverity } from '../../engine/rules/run-rules.ts';
import { classNames } from '../../lib/class-names.ts';
import type { Preview } from './preview.ts';

type Drawn = Extract<Preview, { ok: true }>;

const mostSentences = 3;

const count = (n: number, one: string, many: string): string => `${n} ${n === 1 ? one : many}`;

/** What is on the sheet, in numbers, for who doesn't see it. */
const contents = ({ design }: Drawn): string =>
  [
    count(Object.keys(design.sites).length, 'site', 'sites'),
    count(Object.keys(design.tunnels).length, 'tunnel', 'tunnels'),
    count(Object.keys(design.associations).length, 'association', 'associations'),
    count(Object.values(design.devices).filter(({ kind }) => kind === 'host').length, 'host', 'hosts'),
  ].join(', ');

/** The sheet as the form would leave it, and what the checks say of it. `last` is what was drawn before a mistake. */
export function PreviewSheet({
  preview,
  last,
  behind,
  doing,
  failed,
}: {
  readonly preview: Preview | undefined;
  readonly last: Drawn | undefined;
  readonly behind: boolean;
  /** The step that a large plan is at. */
  readonly doing: string | undefined;
  readonly failed: string | undefined;
}) {
  const drawn = preview?.ok === true ? preview : last;
  const faulty = preview?.ok === false;
  return (
    <div className="flex min-h-0 flex-1 flex-col">
      <div className="flex min-h-0 flex-1 items-center justify-center p-16">
        {drawn !== undefined && (
          <svg
            role="img"
            aria-label={`Preview of the sheet: ${contents(drawn)}`}
            viewBox={`0 0 ${drawn.sheet.width} ${drawn.sheet.height}`}
            className={classNames('h-full w-full', (faulty || behind) && 'opacity-60')}
          >
            {drawn.layers.map(({ name, shapes }) => (
              <g key={name}>
                <Shapes shapes={shapes} />
              </g>
            ))}
          </svg>
        )}
      </div>
      <div role="status" className="border-t border-rule-2 bg-panel px-20 py-12 text-base">
        {failed !== undefined ? (
          <ErrorNotice>{failed}</ErrorNotice>
        ) : behind || preview === undefined ? (
          <p className="text-ink-2">{doing ?? 'Drawing'}…</p>
        ) : preview.ok ? (
          <Verdict drawn={preview} />
        ) : (
          <p className="flex items-center gap-6 text-red">
            <SeverityShape severity="blocking" />
            {preview.problems.length === 1
              ? 'One field stands in the way.'
              : `${preview.problems.length} fields stand in the way.`}
          </p>
        )}
      </div>
    </div>
  );
}

function Verdict({ drawn }: { readonly drawn: Drawn }) {
  const { findings } = drawn;
  const more = findings.length - mostSentences;
  return (
    <>
      <p className="flex flex-wrap items-center gap-x-16 gap-y-4">
        <SeverityCounts counts={countBySeverity(findings)} worded clear={`All ${rules.length} checks pass`} />
        <span className="text-ink-2">{contents(drawn)}</span>
      </p>
      {findings.slice(0, mostSentences).map(({ key, severity, sentence }) => (
        <p key={key} className="mt-4 flex items-start gap-6 text-ink-2">
          <span className="mt-2">
            <SeverityShape severity={severity} size={12} />
          </span>
          {sentence}
        </p>
      ))}
      {more > 0 && <p className="mt-4 text-note text-ink-3">and {more} more</p>}
    </>
  );
}
