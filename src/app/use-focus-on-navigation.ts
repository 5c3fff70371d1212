import { useEffect, useRef } from 'react';
import { useLocation } from 'react-router-dom';

/**
 * After going to another page the focus stands at the start of its content, as after loading one. A change of what is
 * filtered or selected, which changes the address after the '?' only, leaves the focus where it is.
 */
export function useFocusOnNavigation(): void {
  const { pathname } = useLocation();
  const before = useRef(pathname);
  useEffect(() => {
    if (before.current === pathname) return;
    before.current = pathname;
    // A page that gave its own field the focus knows better.
    if (document.activeElement !== null && document.activeElement !== document.body) {
      if (document.getElementById('main')?.contains(document.activeElement) === true) return;
    }
    document.getElementById('main')?.focus({ preventScroll: true });
  }, [pathname]);
}
