import { useEffect, useState } from 'react';

const tickMs = 30_000;

/** The time now, renewed every half minute, so that 'just now' doesn't stay on the screen for an hour. */
export function useNow(): Date {
  const [now, setNow] = useState(() => new Date());
  useEffect(() => {
    const timer = setInterval(() => setNow(new Date()), tickMs);
    return () => clearInterval(timer);
  }, []);
  return now;
}
