import { mentionPattern, mentionToken, type Mentionable } from '../../contract/comments.ts';

// In the field people stand as '@' and their name, as on paper; in what is sent as tokens that outlast a change of name.

type Member = Pick<Mentionable, 'id' | 'name'> & Partial<Pick<Mentionable, 'role'>>;

/** What a person is called behind the '@'; two of one name are told apart by their roles. */
export const mentionLabel = (member: Member, members: readonly Member[]): string =>
  members.some((other) => other.id !== member.id && other.name === member.name)
    ? `${member.name} (${member.role ?? 'left'})`
    : member.name;

export interface MentionQuery {
  /** Where the '@' stands. */
  readonly from: number;
  readonly words: string;
}

const before = /(?:^|[\s(])@([\p{L}\p{M}\p{N}.'’()-]*(?: [\p{L}\p{M}\p{N}.'’()-]*){0,3})$/u;

/** The mention that is being typed where the caret stands; undefined where none is. */
export const mentionAt = (text: string, caret: number): MentionQuery | undefined => {
  const words = before.exec(text.slice(0, caret))?.[1];
  return words === undefined ? undefined : { from: caret - words.length - 1, words };
};

/** Members whose name has each of the words at the start of one of its own. */
export const membersFor = <M extends Member>(words: string, members: readonly M[]): readonly M[] => {
  const asked = words.toLowerCase().split(/\s+/).filter(Boolean);
  return members.filter((member) => {
    const own = mentionLabel(member, members).toLowerCase().split(/\s+/);
    return asked.every((word) => own.some((part) => part.startsWith(word)));
  });
};

/** The text once a member is chosen for what is being typed, and where the caret goes then. */
export const withMention = (
  text: string,
  caret: number,
  { from }: MentionQuery,
  label: string,
): { readonly text: string; readonly caret: number } => {
  const after = text.slice(caret);
  const mention = `@${label}${/^[\s.,;:!?)]/u.test(after) ? '' : ' '}`;
  return { text: text.slice(0, from) + mention + after, caret: from + mention.length };
};

/** What is sent: each '@' with a member's whole name becomes that member's token. */
export const toBody = (text: string, members: readonly Member[]): string =>
  // The longest name first: one may be the beginning of another.
  [...members]
    .map((member) => ({ id: member.id, at: `@${mentionLabel(member, members)}` }))
    .sort((a, b) => b.at.length - a.at.length)
    .reduce((body, { id, at }) => replaceWhole(body, at, mentionToken(id)), text);

const replaceWhole = (text: string, word: string, by: string): string =>
  text
    .split(word)
    .reduce((whole, part) => (/^[\p{L}\p{N}]/u.test(part) ? whole + word + part : whole + by + part));

/** What is shown to be changed: tokens as names. */
export const toText = (body: string, people: readonly Member[]): string =>
  body.replace(mentionPattern, (token, id: string) => {
    const person = people.find((each) => each.id === id);
    return person === undefined ? token : `@${mentionLabel(person, people)}`;
  });
