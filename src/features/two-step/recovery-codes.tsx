import { Button } from '../../components/button.tsx';
import { showToast } from '../../components/toast.tsx';
import { download } from '../../lib/download.ts';

interface RecoveryCodesProps {
  readonly codes: readonly string[];
  readonly onKept: () => void;
}

/** The recovery codes, this once: to be copied, kept as a file or printed before the page goes on. */
export function RecoveryCodes({ codes, onKept }: RecoveryCodesProps) {
  const text = codes.join('\n');
  const copy = async (): Promise<void> => {
    try {
      await navigator.clipboard.writeText(text);
      showToast({ tone: 'done', text: 'The recovery codes are on the clipboard.' });
    } catch {
      showToast({
        tone: 'failed',
        text: 'The browser let nothing be copied. Mark the codes and copy them by hand.',
      });
    }
  };
  return (
    <section aria-labelledby="recovery-codes" className="border-1.5 border-ink bg-field">
      <h2
        id="recovery-codes"
        className="border-b border-rule-2 bg-panel px-14 py-8 text-section font-semibold"
      >
        Recovery codes
      </h2>
      <div className="px-14 py-12">
        <p className="text-base text-ink-2">
          For the day on which the authenticator is lost. Each works once, in place of a code. They are shown
          this once and kept as hashes: put them where your passwords are, and not on the phone that has the
          authenticator.
        </p>
        <ol className="my-14 grid grid-cols-2 gap-x-28 gap-y-4 text-value font-medium max-sm:grid-cols-1">
          {codes.map((code) => (
            <li key={code} className="border-b border-rule py-3 select-all">
              {code}
            </li>
          ))}
        </ol>
        <div className="flex flex-wrap gap-8">
          <Button onClick={() => void copy()}>Copy</Button>
          <Button
            onClick={() =>
              download('longpatch-recovery-codes.txt', new Blob([`${text}\n`], { type: 'text/plain' }))
            }
          >
            Save as a file
          </Button>
          <Button kind="primary" className="ml-auto" onClick={onKept}>
            I have kept them
          </Button>
        </div>
      </div>
    </section>
  );
}
