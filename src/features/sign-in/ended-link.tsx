import type { ReactNode } from 'react';
import { EmptyState } from '../../components/empty-state.tsx';
import { SheetFrame } from './sheet-frame.tsx';

interface EndedLinkProps {
  readonly heading: string;
  readonly title: string;
  readonly children: ReactNode;
  /** The way out. */
  readonly action: ReactNode;
}

/** A sheet for a link that leads nowhere any more. */
export function EndedLink({ heading, title, children, action }: EndedLinkProps) {
  return (
    <main
      id="main"
      tabIndex={-1}
      className="flex min-h-dvh flex-col p-28 outline-none max-lg:p-12 max-sm:p-0"
    >
      <SheetFrame>
        <div className="m-auto w-full max-w-560 p-28 max-sm:p-14">
          <h1 className="sr-only">{heading}</h1>
          <EmptyState title={title} action={action}>
            {children}
          </EmptyState>
        </div>
      </SheetFrame>
    </main>
  );
}
