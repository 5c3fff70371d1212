const minuteMs = 60_000;
const dayMs = 24 * 60 * minuteMs;

const dayOf = (time: Date): number => new Date(time.getFullYear(), time.getMonth(), time.getDate()).getTime();

/** How long ago, as short as it can be said: 'just now', '4 min ago', '3 h ago', 'yesterday', '11 March', '11 March 2025'. */
export function relativeTime(time: Date, now: Date): string {
  const ago = now.getTime() - time.getTime();
  if (ago < minuteMs) return 'just now';
  if (ago < 60 * minuteMs) return `${Math.floor(ago / minuteMs)} min ago`;
  // Rounded, because a day on which the clocks change is not 24 hours long.
  const daysAgo = Math.round((dayOf(now) - dayOf(time)) / dayMs);
  if (daysAgo === 0) return `${Math.floor(ago / (60 * minuteMs))} h ago`;
  if (daysAgo === 1) return 'yesterday';
  const sameYear = time.getFullYear() === now.getFullYear();
  return new Intl.DateTimeFormat('en-GB', {
    day: 'numeric',
    month: 'long',
    ...(sameYear ? {} : { year: 'numeric' }),
  }).format(time);
}

/** Date and time in the reader's own zone: '18 March 2026, 14:36'. */
export function dateAndTime(time: Date): string {
  const date = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'long', year: 'numeric' });
  const clock = new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit' });
  return `${date.format(time)}, ${clock.format(time)}`;
}

/** The day of a moment by UTC, such as '2027-03-31': the form in which days are kept. */
export const dayByUtc = (time: Date): string => time.toISOString().slice(0, 10);

/** A kept day in words: '31 March 2027'. */
export const dayInWords = (day: string): string =>
  new Intl.DateTimeFormat('en-GB', {
    day: 'numeric',
    month: 'long',
    year: 'numeric',
    timeZone: 'UTC',
  }).format(new Date(`${day}T00:00:00Z`));

/** The reader's time zone as the browser names it, such as 'Europe/London'. */
export const timeZoneName = (): string => new Intl.DateTimeFormat().resolvedOptions().timeZone;
