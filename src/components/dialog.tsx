import { Dialog as Primitive } from 'radix-ui';
import { useRef, type ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';
import { Button } from './button.tsx';
import { Icon } from './icon.tsx';

interface DialogProps {
  readonly open: boolean;
  readonly onOpenChange: (open: boolean) => void;
  readonly title: string;
  /** One sentence under the title. */
  readonly description?: string;
  readonly children: ReactNode;
  /** Buttons at the foot, the one that does it last. */
  readonly footer?: ReactNode;
  readonly widthPx?: number;
  /** Takes the whole window, and leaves it to what is in it how that scrolls. */
  readonly whole?: boolean;
  /** Takes the buttons of the foot into the form, so that Enter presses the one that does it. */
  readonly onSubmit?: () => void;
}

/** Who opens a form wants to type, not to close it. */
function focusFirstField(event: Event): void {
  const panel = event.currentTarget;
  const field = panel instanceof Element ? panel.querySelector<HTMLElement>('input, select, textarea') : null;
  if (field === null) return;
  event.preventDefault();
  field.focus();
}

/** A panel over the page that has to be answered or closed first. */
export function Dialog({
  open,
  onOpenChange,
  title,
  description,
  children,
  footer,
  widthPx = 460,
  whole = false,
  onSubmit,
}: DialogProps) {
  // Opened by the page's state and not by a trigger of the library, which would know it.
  const opener = useRef<Element>(null);
  const body = (
    <>
      <div className={classNames('min-h-0 flex-1', !whole && 'overflow-y-auto px-20 py-16')}>{children}</div>
      {footer !== undefined && (
        <div className="flex flex-wrap justify-end gap-8 border-t border-rule-2 px-20 py-12">{footer}</div>
      )}
    </>
  );
  return (
    <Primitive.Root open={open} onOpenChange={onOpenChange}>
      <Primitive.Portal>
        <div className="fixed inset-0 z-40 bg-casing/40" />
        <div
          className={classNames(
            'pointer-events-none fixed inset-0 z-40 flex justify-center p-16',
            whole ? 'items-stretch max-sm:p-0' : 'items-start pt-[min(12vh,96px)]',
          )}
        >
          <Primitive.Content
            className="pointer-events-auto flex max-h-full w-full flex-col border-1.5 border-ink bg-panel text-ink shadow-sheet outline-none"
            style={whole ? undefined : { maxWidth: widthPx }}
            onOpenAutoFocus={(event) => {
              opener.current = document.activeElement;
              focusFirstField(event);
            }}
            onEscapeKeyDown={(event) => {
              // A list that is open in a field closes first.
              if (document.activeElement?.hasAttribute('aria-activedescendant')) event.preventDefault();
            }}
            onCloseAutoFocus={(event) => {
              const back = opener.current;
              if (!(back instanceof HTMLElement)) return;
              event.preventDefault();
              back.focus();
              // Opened with the page itself, or by what is gone or idle since: one goes on at the page's content.
              if (back === document.body || document.activeElement !== back)
                document.getElementById('main')?.focus({ preventScroll: true });
            }}
            {...(description === undefined ? { 'aria-describedby': undefined } : {})}
          >
            <div className="flex items-start gap-12 border-b border-rule-2 py-12 pr-12 pl-20">
              <div className="min-w-0 flex-1 py-4">
                <Primitive.Title className="text-title">{title}</Primitive.Title>
                {description !== undefined && (
                  <Primitive.Description className="mt-2 text-base text-ink-2">
                    {description}
                  </Primitive.Description>
                )}
              </div>
              <Primitive.Close asChild>
                <Button kind="quiet" iconOnly aria-label="Close" icon={<Icon name="cross" size={14} />} />
              </Primitive.Close>
            </div>
            {onSubmit === undefined ? (
              body
            ) : (
              <form
                noValidate
                className="flex min-h-0 flex-1 flex-col"
                onSubmit={(event) => {
                  event.preventDefault();
                  // React carries events to the parents of a portal too: a form around the dialog is not meant.
                  event.stopPropagation();
                  onSubmit();
                }}
              >
                {body}
              </form>
            )}
          </Primitive.Content>
        </div>
      </Primitive.Portal>
    </Primitive.Root>
  );
}
