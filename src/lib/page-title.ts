import { useEffect } from 'react';

/** Names the browser's tab after the page. */
export function usePageTitle(title: string): void {
  useEffect(() => {
    document.title = `${title} – Longpatch`;
  }, [title]);
}
