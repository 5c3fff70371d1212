import { SeverityMark } from '../../components/severity-mark.tsx';
import { sourceText, type RuleReference } from '../../engine/rules/rule-reference.ts';

const columns =
  'grid grid-cols-[116px_minmax(180px,1fr)_minmax(220px,1.5fr)_minmax(220px,1.5fr)_150px] gap-x-20';

/** Checks as rows: severity, the good state, why it matters, what is seen on site, on what it rests. */
export function RulesList({ rules }: { readonly rules: readonly RuleReference[] }) {
  return (
    <div className="border border-rule-strong bg-field">
      <div
        aria-hidden="true"
        className={`${columns} h-30 items-center bg-strip px-14 font-semibold text-strip-ink max-lg:hidden`}
      >
        <span>Severity</span>
        <span>What holds in a sound design</span>
        <span>Why it matters</span>
        <span>What is seen on site</span>
        <span>Rests on</span>
      </div>
      <ul>
        {rules.map((rule) => (
          <li
            key={rule.id}
            id={rule.id}
            className="scroll-mt-14 border-t border-rule-2 first:border-t-0 target:bg-blue-wash"
          >
            <article className={`${columns} px-14 py-10 max-lg:flex max-lg:flex-col max-lg:gap-y-6`}>
              <div>
                <SeverityMark severity={rule.severity} />
              </div>
              <div>
                <h2 className="text-value font-semibold">{rule.title}</h2>
                <a href={`#${rule.id}`} className="text-note break-words text-ink-3 hover:underline">
                  {rule.id}
                </a>
              </div>
              <Part label="Why it matters">{rule.why}</Part>
              <Part label="What is seen on site">{rule.seen}</Part>
              <div className="text-note text-ink-2">
                <ul>
                  {rule.sources.map((source) => (
                    <li key={sourceText(source)}>{sourceText(source)}</li>
                  ))}
                </ul>
                {rule.canFix && <p className="mt-4">Offers a fix</p>}
              </div>
            </article>
          </li>
        ))}
      </ul>
    </div>
  );
}

/** The label is for narrow screens and screen readers; on wide ones the head of the column says it. */
function Part({ label, children }: { readonly label: string; readonly children: string }) {
  return (
    <div>
      <h3 className="text-label text-ink-3 lg:sr-only">{label}</h3>
      <p className="text-base text-ink-2">{children}</p>
    </div>
  );
}
