import { Button } from '../../components/button.tsx';
import { SeverityMark } from '../../components/severity-mark.tsx';
import type { Waiver } from '../../contract/waivers.ts';
import type { Waived } from '../../engine/rules/waived.ts';
import { focusWhenGone } from '../../lib/focus-when-gone.ts';
import { dayInWords } from '../../lib/format-time.ts';
import type { WaivingTools } from './waiving-tools.ts';

type Lapsed = Waived<Waiver>['lapsed'][number];

/** Why a waiver holds no longer, in a sentence. */
export const lapseWords = ({ waiver, why, finding }: Lapsed): string => {
  if (why === 'expired') return `Its last day was ${dayInWords(waiver.expiresOn)}.`;
  if (why === 'gone' || finding === undefined)
    return 'The design no longer has this finding. Should it come back as it was, the waiver holds again.';
  return finding.sentence === waiver.sentence
    ? 'Values that it was given for have changed.'
    : `The finding has changed. It now says: ${finding.sentence}.`;
};

/** Waivers that nobody took back and that hold no longer, each with why. */
export function LapsedWaivers({
  lapsed,
  waiving,
}: {
  readonly lapsed: readonly Lapsed[];
  readonly waiving: WaivingTools | undefined;
}) {
  if (lapsed.length === 0) return null;
  return (
    <section aria-labelledby="lapsed-waivers" className="mt-24">
      <h2 id="lapsed-waivers" className="text-section font-semibold">
        Lapsed waivers
      </h2>
      <p className="mt-2 mb-10 text-base text-ink-2">
        These hold no longer, each for the reason given. Waive anew after another look, or withdraw what is
        not needed.
      </p>
      <ul className="border border-rule-strong bg-field">
        {lapsed.map((each) => {
          const { waiver, finding } = each;
          return (
            <li
              key={waiver.id}
              className="flex flex-wrap items-start gap-x-16 gap-y-8 border-t border-rule-2 px-12 py-10 text-base first:border-t-0"
            >
              <div className="w-96 shrink-0">
                <SeverityMark severity={waiver.severity} muted />
              </div>
              <div className="min-w-260 flex-1">
                <p className="break-words">{waiver.sentence}</p>
                <p className="font-medium break-words">{lapseWords(each)}</p>
                <p className="break-words whitespace-pre-line text-ink-2">
                  Waived{waiver.madeBy === null ? '' : ` by ${waiver.madeBy}`} until{' '}
                  {dayInWords(waiver.expiresOn)}: {waiver.reason}
                </p>
              </div>
              {waiving !== undefined && (
                <div className="flex flex-wrap gap-8">
                  {finding !== undefined && (
                    <Button small onClick={() => waiving.onWaive(finding.key)}>
                      Waive anew…
                    </Button>
                  )}
                  <Button
                    small
                    onClick={(event) => {
                      focusWhenGone(event.currentTarget);
                      waiving.onWithdraw(waiver.id);
                    }}
                  >
                    Withdraw
                  </Button>
                </div>
              )}
            </li>
          );
        })}
      </ul>
    </section>
  );
}
