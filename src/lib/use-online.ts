import { useSyncExternalStore } from 'react';

function subscribe(listener: () => void): () => void {
  window.addEventListener('online', listener);
  window.addEventListener('offline', listener);
  return () => {
    window.removeEventListener('online', listener);
    window.removeEventListener('offline', listener);
  };
}

/** Whether the browser has a network at all; a server may still be out of reach. */
export const useOnline = (): boolean => useSyncExternalStore(subscribe, () => navigator.onLine);
