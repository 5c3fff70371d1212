import { Tooltip as Primitive } from 'radix-ui';
import type { ReactElement, ReactNode } from 'react';

interface TooltipProps {
  readonly text: ReactNode;
  /** What it explains; has to take a ref and focus. */
  readonly children: ReactElement;
  readonly side?: 'top' | 'right' | 'bottom' | 'left';
}

/** A few words about a control, on hover and on focus; never the only place where something is said. */
export function Tooltip({ text, children, side = 'bottom' }: TooltipProps) {
  return (
    <Primitive.Root>
      <Primitive.Trigger asChild>{children}</Primitive.Trigger>
      <Primitive.Portal>
        <Primitive.Content
          side={side}
          sideOffset={6}
          collisionPadding={8}
          className="z-50 max-w-280 rounded-control bg-strip px-8 py-4 text-note text-strip-ink"
        >
          {text}
        </Primitive.Content>
      </Primitive.Portal>
    </Primitive.Root>
  );
}

/** Around everything that has tooltips: the second one opens without a wait. */
export function TooltipProvider({ children }: { readonly children: ReactNode }) {
  return <Primitive.Provider delayDuration={500}>{children}</Primitive.Provider>;
}
