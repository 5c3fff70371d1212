import { useEffect, useRef, type ReactNode } from 'react';
import { NavLink } from 'react-router-dom';
import { classNames } from '../../lib/class-names.ts';
import { MainBar } from './main-bar.tsx';

/** What there is to an account, each at an address of its own. */
const places = [
  { to: '/account/password', label: 'Password' },
  { to: '/account/two-step', label: 'Two-step sign-in' },
  { to: '/account/sessions', label: 'Sessions' },
  { to: '/account/mail', label: 'Mail' },
  { to: '/account/tokens', label: 'API tokens' },
  { to: '/account/deletion', label: 'Delete account' },
] as const;

interface AccountFrameProps {
  readonly title: string;
  /** What the page is for, in a sentence or two. */
  readonly intro?: ReactNode;
  /** Takes the width that tables need. */
  readonly wide?: boolean;
  readonly children: ReactNode;
}

/** Around every page of the reader's account: the way to the others, and what this one is for. */
export function AccountFrame({ title, intro, wide = false, children }: AccountFrameProps) {
  const nav = useRef<HTMLElement>(null);
  // On a phone the places stand in a row that is wider than the screen.
  useEffect(() => {
    nav.current?.querySelector('[aria-current]')?.scrollIntoView({ block: 'nearest', inline: 'nearest' });
  }, []);
  return (
    <>
      <MainBar />
      <div className="flex min-h-0 flex-1 max-md:flex-col max-md:overflow-y-auto">
        <nav
          ref={nav}
          aria-label="Account"
          className="w-190 shrink-0 border-r border-rule-2 py-24 max-md:w-auto max-md:border-r-0 max-md:border-b max-md:py-0"
        >
          <p className="px-20 pb-8 text-label text-ink-3 max-md:hidden">Account</p>
          <ul className="flex flex-col max-md:flex-row max-md:overflow-x-auto">
            {places.map(({ to, label }) => (
              <li key={to}>
                <NavLink
                  to={to}
                  className={({ isActive }) =>
                    classNames(
                      'flex h-34 items-center px-20 text-base whitespace-nowrap -outline-offset-2 max-md:h-44 max-md:px-14',
                      isActive
                        ? 'bg-raise font-semibold text-ink shadow-[inset_4px_0_0_var(--ink)] max-md:shadow-[inset_0_-4px_0_var(--ink)]'
                        : 'font-medium text-ink-2 hover:bg-hover hover:text-ink',
                    )
                  }
                >
                  {label}
                </NavLink>
              </li>
            ))}
          </ul>
        </nav>
        <main
          id="main"
          tabIndex={-1}
          className="min-w-0 flex-1 overflow-y-auto p-28 pt-20 outline-none max-md:overflow-visible max-md:p-14"
        >
          <div className={wide ? 'max-w-1040' : 'max-w-560'}>
            <h1 className="mb-6 text-page font-semibold">{title}</h1>
            {intro !== undefined && <div className="mb-18 max-w-640 text-base text-ink-2">{intro}</div>}
            {children}
          </div>
        </main>
      </div>
    </>
  );
}
