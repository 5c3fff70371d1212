import type { ReactNode } from 'react';
import { classNames } from '../../lib/class-names.ts';

const columns = ['1', '2', '3', '4', '5', '6', '7', '8'];
const rows = ['A', 'B', 'C', 'D', 'E', 'F'];

/** An empty sheet: trim line, zone grid, frame. The zones give way on narrow screens. */
export function SheetFrame({ children }: { readonly children: ReactNode }) {
  return (
    <div className="relative flex flex-1 flex-col bg-paper px-36 py-34 shadow-sheet max-lg:p-12">
      <div
        aria-hidden="true"
        className="pointer-events-none absolute inset-x-14 inset-y-13 border border-ink-3/70 text-label text-ink-2 max-lg:hidden"
      >
        <Zones
          names={columns}
          className="inset-x-22 top-0 h-21 flex-row"
          cell="border-l justify-center pt-3"
        />
        <Zones
          names={columns}
          className="inset-x-22 bottom-0 h-21 flex-row"
          cell="border-l justify-center pt-3"
        />
        <Zones
          names={rows}
          className="inset-y-21 left-0 w-22 flex-col"
          cell="border-t items-center justify-center"
        />
        <Zones
          names={rows}
          className="inset-y-21 right-0 w-22 flex-col"
          cell="border-t items-center justify-center"
        />
        <CentringMark className="-top-10 left-1/2 h-37 w-2" />
        <CentringMark className="-bottom-10 left-1/2 h-37 w-2" />
        <CentringMark className="top-1/2 -left-11 h-2 w-37" />
        <CentringMark className="top-1/2 -right-11 h-2 w-37" />
      </div>
      <div className="relative flex flex-1 flex-col overflow-hidden border-[2.4px] border-ink">
        {children}
      </div>
    </div>
  );
}

function Zones({
  names,
  className,
  cell,
}: {
  readonly names: readonly string[];
  readonly className: string;
  readonly cell: string;
}) {
  return (
    <div className={classNames('absolute flex', className)}>
      {names.map((name, at) => (
        <span
          key={name}
          className={classNames(
            'flex flex-1 border-ink-3/70',
            at > 0 && cell,
            at === 0 && cell.replace(/border-\S+ /, ''),
          )}
        >
          {name}
        </span>
      ))}
    </div>
  );
}

const CentringMark = ({ className }: { readonly className: string }) => (
  <span className={classNames('absolute bg-ink', className)} />
);
