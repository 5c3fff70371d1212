import { useId, type ReactNode } from 'react';
import { Button } from './button.tsx';
import { showToast } from './toast.tsx';

interface ShownOnceProps {
  /** What it is, such as 'token'. */
  readonly what: string;
  readonly secret: string;
  /** What becomes of it, and how it is used. */
  readonly children: ReactNode;
  readonly onKept: () => void;
}

/** A secret that was just made, this once. */
export function ShownOnce({ what, secret, children, onKept }: ShownOnceProps) {
  const id = useId();
  const copy = async (): Promise<void> => {
    try {
      await navigator.clipboard.writeText(secret);
      showToast({ tone: 'done', text: `The ${what} is on the clipboard.` });
    } catch {
      showToast({
        tone: 'failed',
        text: `The browser let nothing be copied. Mark the ${what} and copy it by hand.`,
      });
    }
  };
  return (
    <section aria-labelledby={id} className="border-1.5 border-ink bg-field">
      <h2 id={id} className="border-b border-rule-2 bg-panel px-14 py-8 text-section font-semibold">
        The new {what}, this once
      </h2>
      <div className="flex flex-col gap-10 px-14 py-12">
        <p className="border border-rule-strong bg-raise px-9 py-6 text-value font-medium break-all select-all">
          {secret}
        </p>
        <p className="text-base text-ink-2">{children}</p>
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
