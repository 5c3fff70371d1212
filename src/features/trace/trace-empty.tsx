import { Button } from '../../components/button.tsx';
import { UncabledPicture } from '../../components/empty-state.tsx';
import { Icon } from '../../components/icon.tsx';
import type { TraceQuestion } from './trace-question.ts';
import type { TraceStart } from './trace-starts.ts';

interface TraceEmptyProps {
  readonly starts: readonly TraceStart[];
  readonly onStart: (question: TraceQuestion) => void;
}

/** Before anything is sent: what a trace tells, and questions of this very design, asked by one press. */
export function TraceEmpty({ starts, onStart }: TraceEmptyProps) {
  return (
    <div className="flex h-full flex-wrap items-center justify-center gap-x-40 gap-y-16 overflow-y-auto bg-raise px-24 py-16">
      <div className="max-w-320">
        <UncabledPicture />
        <h2 className="mt-8 text-section font-semibold text-ink">Follow one frame, hop by hop</h2>
        <p className="mt-4 text-base text-ink-2">
          See its bytes grow on every wire, who takes it, and where and why it ends. Choose From and To, pick
          them on the sheet, or begin with one of these.
        </p>
      </div>
      {starts.length === 0 ? (
        <p className="max-w-320 text-base text-ink-2">
          No two sites of this design have hosts on one segment yet. Place a host at each, on the same
          segment, and questions about them stand here.
        </p>
      ) : (
        <ul className="flex w-360 max-w-full flex-col border border-rule-strong bg-field">
          {starts.map(({ label, shows, question }) => (
            <li key={label} className="border-t border-rule first:border-t-0">
              <Button
                kind="quiet"
                className="h-auto! w-full justify-start! py-8! text-left whitespace-normal!"
                icon={<Icon name="play" size={14} />}
                onClick={() => onStart(question)}
              >
                <span>
                  <span className="block font-semibold">{label}</span>
                  <span className="block font-normal text-ink-2">{shows}</span>
                </span>
              </Button>
            </li>
          ))}
        </ul>
      )}
    </div>
  );
}
