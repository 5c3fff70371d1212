import { Toast as Primitive } from 'radix-ui';
import { create } from 'zustand';
import { classNames } from '../lib/class-names.ts';
import { PersonTag } from './person-tag.tsx';
import { SeverityShape } from './severity-mark.tsx';

export interface ToastMessage {
  /** `done`: it worked; `failed`: it didn't; `other`: somebody else did something. */
  readonly tone: 'done' | 'failed' | 'other';
  readonly text: string;
  readonly person?: { readonly initials: string; readonly name: string };
  readonly action?: { readonly label: string; readonly onSelect: () => void };
}

interface ShownToast extends ToastMessage {
  readonly id: number;
}

const shortMs = 6_000;
// Long enough to read the sentence, decide and reach the button.
const withActionMs = 15_000;
const mostAtOnce = 3;

const useToasts = create<{ readonly toasts: readonly ShownToast[]; readonly nextId: number }>(() => ({
  toasts: [],
  nextId: 1,
}));

/** Says something for a moment, in the corner. Can be called from anywhere, not only from components. */
export function showToast(message: ToastMessage): number {
  const { toasts, nextId } = useToasts.getState();
  useToasts.setState({
    toasts: [...toasts, { ...message, id: nextId }].slice(-mostAtOnce),
    nextId: nextId + 1,
  });
  return nextId;
}

export function dismissToast(id: number): void {
  useToasts.setState(({ toasts }) => ({ toasts: toasts.filter((toast) => toast.id !== id) }));
}

const looks = {
  done: 'border-strip bg-strip text-strip-ink',
  failed: 'border-red bg-red-wash text-ink',
  other: 'border-blue bg-blue-wash text-ink',
} as const;

/** Where toasts stand. F8 moves the focus there; they wait while they are pointed at or focused. */
export function ToastRegion() {
  const toasts = useToasts((state) => state.toasts);
  return (
    <Primitive.Provider label="Message" swipeDirection="left">
      {toasts.map((toast) => (
        <Primitive.Root
          key={toast.id}
          // A failure stays until it is read: what it says may be nowhere else.
          duration={toast.tone === 'failed' ? Infinity : toast.action === undefined ? shortMs : withActionMs}
          type={toast.tone === 'other' ? 'background' : 'foreground'}
          onOpenChange={(open) => {
            if (!open) dismissToast(toast.id);
          }}
          className={classNames(
            'flex items-center gap-12 rounded-control border px-13 py-8 text-base shadow-sheet',
            looks[toast.tone],
          )}
        >
          {toast.tone === 'failed' && <SeverityShape severity="blocking" />}
          {toast.person !== undefined && <PersonTag {...toast.person} presence="other" />}
          <Primitive.Description className="min-w-0 flex-1">{toast.text}</Primitive.Description>
          {toast.action !== undefined && (
            <Primitive.Action asChild altText={toast.action.label}>
              <button type="button" className="font-semibold underline" onClick={toast.action.onSelect}>
                {toast.action.label}
              </button>
            </Primitive.Action>
          )}
          {toast.tone === 'failed' && (
            <Primitive.Close className="font-semibold underline">Close</Primitive.Close>
          )}
        </Primitive.Root>
      ))}
      <Primitive.Viewport className="fixed bottom-46 left-14 z-60 md:left-168 flex w-390 max-w-[calc(100vw-28px)] flex-col gap-8 outline-none" />
    </Primitive.Provider>
  );
}
