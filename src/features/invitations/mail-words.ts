import type { MailState } from '../../contract/invitations.ts';
import { relativeTime } from '../../lib/format-time.ts';

/** What became of an invitation's mail, and whether somebody should do something about it. */
export function mailWords(
  mail: MailState | null,
  now: Date,
): { readonly words: string; readonly isAmiss: boolean } {
  if (mail === null) return { words: 'none; send it again', isAmiss: true };
  const { state, at, problem } = mail;
  switch (state) {
    case 'sent':
      return { words: `sent ${relativeTime(new Date(at), now)}`, isAmiss: false };
    case 'waiting':
      return problem === null
        ? { words: 'on its way', isAmiss: false }
        : { words: `waits and is tried again: ${problem}`, isAmiss: true };
    case 'failed':
      return { words: `not sent: ${problem ?? 'no reason known'}`, isAmiss: true };
    case 'uncertain':
      return { words: `${problem ?? 'probably sent'}. If it has not, send it again.`, isAmiss: true };
  }
}
