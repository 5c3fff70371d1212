import { valueAt } from '../../canvas/inspector/use-field.ts';
import { profileSchema, type Profile } from '../../engine/model/underlay.ts';
import { fieldKey, profileFields, type ProfileField } from './profile-fields.ts';

/** A profile while it is being typed: a text for each field, '' where nothing is stated. */
export type ProfileDraft = Readonly<Record<string, string>>;

export type ReadDraft =
  | { readonly ok: true; readonly profile: Profile }
  /** By field, as sentences with the way out. */
  | { readonly ok: false; readonly problems: Readonly<Record<string, string>> };

const textOf = (field: ProfileField, value: unknown): string => {
  if (value === undefined) return '';
  return field.kind === 'chosen' ? String(value) : field.write(value);
};

export const draftOf = (profile: Profile): ProfileDraft =>
  Object.fromEntries(
    profileFields.map((field) => [fieldKey(field), textOf(field, valueAt(profile, field.path))]),
  );

export const emptyDraft: ProfileDraft = draftOf({ name: '' });

export const sameDraft = (a: ProfileDraft, b: ProfileDraft): boolean =>
  profileFields.every((field) => (a[fieldKey(field)] ?? '').trim() === (b[fieldKey(field)] ?? '').trim());

const sentence = (field: ProfileField, text: string, wayOut: string): string =>
  text === '' ? `${field.label} is empty: ${wayOut}.` : `${field.label} ${text} does not fit: ${wayOut}.`;

/** The value that a field's text stands for; undefined for an empty one. */
const read = (
  field: ProfileField,
  text: string,
): { readonly value: unknown } | { readonly problem: string } => {
  if (text === '') return { value: undefined };
  if (field.kind === 'chosen')
    return { value: field.choices.find(({ value }) => String(value) === text)?.value };
  const reading = field.read(text);
  return reading.ok ? { value: reading.value } : { problem: sentence(field, text, reading.wayOut) };
};

/** The profile that a draft stands for, or what is wrong in it. */
export const readDraft = (draft: ProfileDraft): ReadDraft => {
  const problems: Record<string, string> = {};
  const profile: Record<string, unknown> = {};
  for (const field of profileFields) {
    const [first = '', second] = field.path;
    const result = read(field, (draft[fieldKey(field)] ?? '').trim());
    if ('problem' in result) problems[fieldKey(field)] = result.problem;
    else if (result.value !== undefined) {
      if (second === undefined) profile[first] = result.value;
      else profile[first] = { ...(profile[first] as object | undefined), [second]: result.value };
    }
  }
  const parsed = profileSchema.safeParse(profile);
  for (const issue of parsed.error?.issues ?? []) {
    const key = issue.path.join('.');
    const field = profileFields.find((candidate) => fieldKey(candidate) === key);
    if (field === undefined || problems[key] !== undefined) continue;
    const text = (draft[key] ?? '').trim();
    const wayOut = text === '' ? 'it has to be given' : issue.message.replace(/^expected /, 'type ');
    problems[key] = sentence(field, text, wayOut);
  }
  return parsed.success && Object.keys(problems).length === 0
    ? { ok: true, profile: parsed.data }
    : { ok: false, problems };
};
