import { useSearchParams } from 'react-router-dom';

interface SearchValues {
  /** What stands under this name, '' when nothing does. */
  readonly valueOf: (name: string) => string;
  /** Sets all of these at once; '' takes a name out of the address. */
  readonly change: (values: Readonly<Record<string, string>>) => void;
}

/** The address after the '?', where filters are kept so that what is seen can be sent to a colleague. */
export function useSearchValues(): SearchValues {
  const [params, setParams] = useSearchParams();
  return {
    valueOf: (name) => params.get(name) ?? '',
    change: (values) => {
      const next = new URLSearchParams(params);
      for (const [name, value] of Object.entries(values)) {
        if (value === '') next.delete(name);
        else next.set(name, value);
      }
      // Typing is no way that one would go back step by step; and a field that shows the address has to keep up with it.
      setParams(next, { replace: true, preventScrollReset: true, flushSync: true });
    },
  };
}
