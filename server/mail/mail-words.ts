import type { Role } from '#contract/session.ts';
import type { Digest, Mail, Notification } from './mail.ts';

/** What a mail says, before it is text or HTML. Every part is plain text on lines of its own. */
export interface MailWords {
  readonly subject: string;
  readonly heading: string;
  readonly paragraphs: readonly string[];
  /** What a person wrote. */
  readonly quote?: string;
  readonly action?: MailLink;
  /** A digest's events, each with its own link. */
  readonly items?: readonly MailItem[];
  /** Why the reader gets this, and what to do if it is not for them. */
  readonly footer: readonly string[];
}

export interface MailLink {
  readonly label: string;
  readonly href: string;
}

export interface MailItem {
  readonly sentence: string;
  readonly quote?: string;
  readonly link: MailLink;
}

const longestSubject = 160;
const longestQuote = 2_000;

const roleSentences: { readonly [role in Role]: string } = {
  owner: 'You will run the workspace: its people, pools and profiles, and everything in it.',
  architect: 'You will create and edit designs, and ask for their review.',
  reviewer: 'You will read designs, comment on them, and approve them or send them back.',
  presales: 'You will read and comment on designs, start drafts, and share revisions with customers.',
  installer: 'You will read approved revisions and build from them.',
};

/** What a mail says. `publicUrl` leads to the settings that it names. */
export function wordsOf(mail: Mail | Digest, publicUrl: string): MailWords {
  switch (mail.kind) {
    case 'invitation':
      return {
        subject: inOneLine(`${mail.inviterName} invites you to ${mail.workspaceName}`, longestSubject),
        heading: inOneLine(`Join ${mail.workspaceName} on Longpatch`),
        paragraphs: [
          inOneLine(
            `${mail.inviterName} invites you to the workspace ${mail.workspaceName} as ${mail.role}. ${roleSentences[mail.role]}`,
          ),
          `The invitation is for ${mail.to} alone. It can be used once, until ${timeInWords(mail.expiresAt)}.`,
        ],
        action: { label: 'Open the invitation', href: mail.link },
        footer: [
          'You were invited by name; if you don’t know who this is, leave the invitation unused and it ends by itself.',
        ],
      };
    case 'reset':
      return {
        subject: 'Set a new password for Longpatch',
        heading: 'Set a new password',
        paragraphs: [
          inOneLine(
            `Somebody, probably you, asked for a new password for ${mail.to.name} (${mail.to.email}).`,
          ),
          `The link can be used once, until ${timeInWords(mail.expiresAt)}. A new password ends every session of yours.`,
        ],
        action: { label: 'Set a new password', href: mail.link },
        footer: ['If it wasn’t you, leave the link unused: your password stays as it is.'],
      };
    case 'digest':
      return {
        subject: inOneLine(`Your day on Longpatch: ${eventCount(mail.items.length)}`, longestSubject),
        heading: `Since yesterday: ${eventCount(mail.items.length)}`,
        paragraphs: [],
        items: mail.items.map((item) => ({
          sentence: `${sentenceOf(item)}.`,
          ...quoteOf(item),
          link: { label: 'Open the design', href: item.link },
        })),
        footer: settingsFooter(publicUrl),
      };
    default:
      return {
        subject: inOneLine(sentenceOf(mail), longestSubject),
        heading: inOneLine(sentenceOf(mail)),
        paragraphs: nextStepOf(mail),
        ...quoteOf(mail),
        action: { label: 'Open the design', href: mail.link },
        footer: settingsFooter(publicUrl),
      };
  }
}

function sentenceOf(mail: Notification): string {
  const title = `‘${inOneLine(mail.designTitle)}’`;
  switch (mail.kind) {
    case 'review-asked':
      return `${inOneLine(mail.by)} asks you to review ${title}`;
    case 'approved':
      return `${inOneLine(mail.by)} approved ${title}`;
    case 'sent-back':
      return `${inOneLine(mail.by)} sent ${title} back`;
    case 'mention':
      return `${inOneLine(mail.by)} mentioned you on ${title}`;
    case 'share-opened':
      return `Your share of ${title} was opened (${inOneLine(mail.label)})`;
  }
}

function nextStepOf(mail: Notification): readonly string[] {
  switch (mail.kind) {
    case 'review-asked':
      return ['Look at it, comment where something is not clear, and approve it or send it back.'];
    case 'approved':
      return ['The revision is frozen as it was approved; the next change is a new draft.'];
    case 'sent-back':
      return ['It is a draft again: change what was asked for, and ask for its review again.'];
    case 'mention':
    case 'share-opened':
      return [];
  }
}

function quoteOf(mail: Notification): { readonly quote?: string } {
  const written = mail.kind === 'mention' ? mail.excerpt : mail.kind === 'share-opened' ? '' : mail.message;
  const quote = inLines(written);
  return quote === '' ? {} : { quote };
}

function settingsFooter(publicUrl: string): readonly string[] {
  return [
    `You get this as a member of the workspace. At once, once a day or not at all: ${publicUrl}/account/mail`,
  ];
}

const eventCount = (count: number): string => (count === 1 ? '1 event' : `${count} events`);

function timeInWords(time: Date): string {
  const date = new Intl.DateTimeFormat('en-GB', {
    day: 'numeric',
    month: 'long',
    year: 'numeric',
    timeZone: 'UTC',
  });
  return `${date.format(time)}, ${time.toISOString().slice(11, 16)} UTC`;
}

// Direction marks that reorder what follows could make an address or a name read as another.
const reordering = /[\u202a-\u202e\u2066-\u2069]/g;
const controls = /[\p{Cc}\p{Zl}\p{Zp}]+/gu;

/** Text that people typed, as it may stand in a header: no line breaks, no control characters, cut to length. */
export function inOneLine(text: string, longest = 400): string {
  const line = text.replace(reordering, '').replace(controls, ' ').trim();
  return shortened(line, longest);
}

function inLines(text: string): string {
  const lines = text
    .split(/\r\n|[\r\n\u2028\u2029]/)
    .map((line) => line.replace(reordering, '').replace(controls, ' ').trimEnd());
  return shortened(lines.join('\n').trim(), longestQuote);
}

function shortened(text: string, longest: number): string {
  const letters = [...text];
  return letters.length <= longest ? text : `${letters.slice(0, longest - 1).join('')}…`;
}
