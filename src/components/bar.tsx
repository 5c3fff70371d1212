import { createContext, use, useState, type ReactNode } from 'react';
import { createPortal } from 'react-dom';
import { Link, NavLink } from 'react-router-dom';
import { classNames } from '../lib/class-names.ts';
import { Mark } from './mark.tsx';

const BarSlotContext = createContext<HTMLElement | null>(null);

interface BarProps {
  /** What every page shows at the right end. */
  readonly end: ReactNode;
  readonly children: ReactNode;
}

/** The bar on top, 45 px high, above the page. The page fills its middle with `BarContents`. */
export function WithBar({ end, children }: BarProps) {
  const [slot, setSlot] = useState<HTMLElement | null>(null);
  return (
    <BarSlotContext value={slot}>
      <header className="sticky top-0 z-30 flex h-45 shrink-0 items-stretch border-b-1.5 border-ink bg-panel">
        <Link
          to="/"
          aria-label="Longpatch, to the start"
          className="flex w-156 shrink-0 items-center gap-10 border-r border-rule-2 pl-13 text-section font-semibold text-ink -outline-offset-2 max-md:w-auto max-md:pr-13"
        >
          <Mark width={33} />
          <span className="max-md:sr-only">Longpatch</span>
        </Link>
        <div
          ref={setSlot}
          className="flex min-w-0 flex-1 items-stretch overflow-x-auto overflow-y-hidden [scrollbar-width:none]"
        />
        <div className="flex shrink-0 items-center gap-8 px-12 max-md:px-8">{end}</div>
      </header>
      {children}
    </BarSlotContext>
  );
}

/** Puts its children into the middle of the bar while it is mounted. */
export function BarContents({ children }: { readonly children: ReactNode }) {
  const slot = use(BarSlotContext);
  return slot === null ? null : createPortal(children, slot);
}

/** A cell of the bar: label above value. */
export function BarCell({
  label,
  children,
  className,
}: {
  readonly label: string;
  readonly children: ReactNode;
  readonly className?: string;
}) {
  return (
    <div
      className={classNames(
        'flex min-w-0 shrink-0 flex-col justify-center border-r border-rule-2 px-11',
        className,
      )}
    >
      <span className="text-label text-ink-3">{label}</span>
      <span className="flex min-h-18 min-w-0 items-center gap-6 text-base font-semibold whitespace-nowrap text-ink">
        {children}
      </span>
    </div>
  );
}

export interface BarDestination {
  readonly to: string;
  readonly label: string;
  /** Active only at exactly this path. */
  readonly end?: boolean;
}

/** The places to go from here; the one the reader is at has a foot. */
export function BarNav({
  label,
  destinations,
}: {
  readonly label: string;
  readonly destinations: readonly BarDestination[];
}) {
  return (
    <nav
      aria-label={label}
      className="flex min-w-0 items-stretch gap-16 overflow-x-auto px-20 max-md:gap-12 max-md:px-12"
    >
      {destinations.map(({ to, label: name, end }) => (
        <NavLink
          key={to}
          to={to}
          end={end}
          className={({ isActive }) =>
            classNames(
              'relative flex items-center text-base whitespace-nowrap -outline-offset-2',
              isActive
                ? 'font-semibold text-ink after:absolute after:inset-x-0 after:bottom-0 after:h-4 after:bg-ink'
                : 'font-medium text-ink-2 hover:text-ink',
            )
          }
        >
          {name}
        </NavLink>
      ))}
    </nav>
  );
}
