import { Outlet, ScrollRestoration } from 'react-router-dom';
import { OfflineNotice } from './offline-notice.tsx';
import { useFocusOnNavigation } from './use-focus-on-navigation.ts';

/** Around every page: where the focus goes on the way from one to the next, and word of a lost network. */
export function Root() {
  useFocusOnNavigation();
  return (
    <>
      <a
        href="#main"
        onClick={(event) => {
          event.preventDefault();
          document.getElementById('main')?.focus();
        }}
        className="sr-only rounded-control bg-strip px-13 py-6 text-base font-semibold text-strip-ink focus:not-sr-only focus:fixed focus:top-8 focus:left-8 focus:z-60"
      >
        Skip to the content
      </a>
      <OfflineNotice />
      <Outlet />
      <ScrollRestoration />
    </>
  );
}
