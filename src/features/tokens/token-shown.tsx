import { Button } from '../../components/button.tsx';
import { showToast } from '../../components/toast.tsx';

/** A token that was just made, this once. */
export function TokenShown({ secret, onKept }: { readonly secret: string; readonly onKept: () => void }) {
  const copy = async (): Promise<void> => {
    try {
      await navigator.clipboard.writeText(secret);
      showToast({ tone: 'done', text: 'The token is on the clipboard.' });
    } catch {
      showToast({
        tone: 'failed',
        text: 'The browser let nothing be copied. Mark the token and copy it by hand.',
      });
    }
  };
  return (
    <section aria-labelledby="new-token" className="border-1.5 border-ink bg-field">
      <h2 id="new-token" className="border-b border-rule-2 bg-panel px-14 py-8 text-section font-semibold">
        The new token, this once
      </h2>
      <div className="flex flex-col gap-10 px-14 py-12">
        <p className="border border-rule-strong bg-raise px-9 py-6 text-value font-medium break-all select-all">
          {secret}
        </p>
        <p className="text-base text-ink-2">
          It is kept as a hash and can’t be shown again. A script sends it with every request as{' '}
          <span className="font-medium text-ink">Authorization: Bearer</span> and the token.
        </p>
        <div className="flex flex-wrap gap-8">
          <Button onClick={() => void copy()}>Copy</Button>
          <Button kind="primary" className="ml-auto" onClick={onKept}>
            I have kept it
          </Button>
        </div>
      </div>
    </section>
  );
}
