import type { ReactNode } from 'react';
import { CordInTheGround } from './cord-in-the-ground.tsx';
import { SheetFrame } from './sheet-frame.tsx';

interface FrontSheetProps {
  /** What stands at the left of the title block. */
  readonly beside?: ReactNode;
  /** The title block. */
  readonly children: ReactNode;
}

/** An empty sheet with the cord in the ground, for pages of whoever is not signed in yet: its title block is the form. */
export function FrontSheet({ beside, children }: FrontSheetProps) {
  return (
    <main
      id="main"
      tabIndex={-1}
      className="flex min-h-dvh flex-col p-28 outline-none max-lg:p-12 max-sm:p-0"
    >
      <SheetFrame>
        <CordInTheGround
          view="whole"
          className="mx-auto block max-h-[max(280px,calc(100dvh-540px))] w-full overflow-visible max-lg:hidden"
        />
        <div className="mt-auto flex items-end justify-between gap-28 pt-16 max-lg:mt-0 max-lg:flex-col max-lg:items-stretch max-lg:gap-0 max-lg:pt-0">
          <div className="max-w-440 px-28 pb-28 text-base text-ink-2 max-lg:order-2 max-lg:p-14">
            {beside}
          </div>
          <div className="w-570 shrink-0 border-t-[2.4px] border-l-[2.4px] border-ink max-lg:order-1 max-lg:w-auto max-lg:border-0 max-lg:border-b-[2.4px]">
            {children}
          </div>
        </div>
      </SheetFrame>
    </main>
  );
}
