import { longestShareDays } from '../../contract/shares.ts';
import { dayByUtc } from '../../lib/format-time.ts';

const dayMs = 24 * 60 * 60 * 1000;

/** The last day on which a link that is made now may end. */
export const lastDayFrom = (now: Date): string =>
  dayByUtc(new Date(now.getTime() + longestShareDays * dayMs));

/** The day that a new link ends on unless one says otherwise: a month is a proposal's life. */
export const proposedDay = (now: Date): string => dayByUtc(new Date(now.getTime() + 30 * dayMs));

export interface ShareWords {
  readonly label: string;
  readonly expiresOn: string;
  readonly passphrase: string;
}

/** What is wrong with what was typed, by field; {} when nothing is. */
export const shareProblems = (
  { label, expiresOn, passphrase }: ShareWords,
  now: Date,
): { readonly [field in keyof ShareWords]?: string } => {
  const words = label.trim();
  const last = lastDayFrom(now);
  return {
    ...(words === '' ? { label: 'For is empty. Say who the link is for, such as the customer.' } : {}),
    ...(words.length > 80 ? { label: `For has ${words.length} characters. Keep it to 80.` } : {}),
    ...(expiresOn < dayByUtc(now) || expiresOn > last
      ? { expiresOn: `Last day ${expiresOn || 'is empty: it'} has to be from today to ${last}.` }
      : {}),
    ...(passphrase !== '' && passphrase.length < 8
      ? { passphrase: `Passphrase has ${passphrase.length} characters. Use at least 8, or none.` }
      : {}),
  };
};
