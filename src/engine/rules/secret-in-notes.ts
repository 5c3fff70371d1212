import type { Collection, Entry } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { pastedSecret } from '../model/pasted-secret.ts';
import type { DesignFacts } from '../network/network.ts';
import { perObject } from '../network/network.ts';
import { defineRule } from './define-rule.ts';

type Noted = 'sites' | 'devices' | 'transports' | 'associations' | 'tunnels' | 'segments' | 'notes';
const noted: readonly Noted[] = [
  'sites',
  'devices',
  'transports',
  'associations',
  'tunnels',
  'segments',
  'notes',
];

const textOf = (entry: Entry<Noted>): string | undefined => ('text' in entry ? entry.text : entry.notes);
const holdsSecret = perObject(
  (entry: Entry<Noted>): boolean => pastedSecret(textOf(entry) ?? '') !== undefined,
);

/** Ids of the entries of a collection whose notes hold what looks like a key. */
const holders = perObject((entries: DesignFacts[Noted]): readonly string[] =>
  Object.entries(entries).flatMap(([id, entry]) => (holdsSecret(entry) ? [id] : [])),
);

const gone = '[gone]';
/** The text with each secret replaced by a word that is shorter than any. */
const withoutSecrets = (text: string): string => {
  const secret = pastedSecret(text);
  return secret === undefined ? text : withoutSecrets(text.replaceAll(secret, gone));
};

const nameOf = (entry: Entry<Noted>): string => ('text' in entry ? 'A note on the sheet' : entry.name);
const propertyOf = (collection: Collection): 'text' | 'notes' => (collection === 'notes' ? 'text' : 'notes');

export const secretInNotes = defineRule({
  id: 'secret-in-notes',
  title: 'No key stands in a note',
  severity: 'degrading',
  looksAt: noted as readonly [Noted, ...Noted[]],
  why: 'A design is read by everybody in the workspace, its revisions by installers, and links are shared with customers: a key in a note is a key to none of them alone. Every edit is kept, so taking it out of the note does not make it secret again.',
  seen: 'Somebody who was never given the key sets an association up, or reads what it carries; nothing on the devices shows it.',
  sources: ['common practice, no source'],
  messages: {
    pasted: {
      words: 'Key in note',
      sentence: (v: { readonly name: string; readonly isNote: boolean }) =>
        v.isNote
          ? `${v.name} holds what looks like a key or password; change that key, and keep the new one elsewhere`
          : `The notes of ${v.name} hold what looks like a key or password; change that key, and keep the new one elsewhere`,
    },
  },
  check: ({ design }) =>
    noted.flatMap((collection) =>
      holders(design[collection]).map((id) => {
        const ref = { collection, id } as const;
        return {
          message: 'pasted' as const,
          values: {
            name: nameOf(design[collection][id]!),
            isNote: collection === 'notes',
          },
          elements: [ref],
          properties: [{ ref, path: [propertyOf(collection)] }],
        };
      }),
    ),
  fixes: (fault, { design }) => {
    const { collection, id } = fault.elements[0]!;
    const entry = design[collection as Noted][id]!;
    const patch: MergePatch = {
      [collection]: { [id]: { [propertyOf(collection)]: withoutSecrets(textOf(entry) ?? '') } },
    };
    return [
      {
        id: 'take-out',
        label: 'Take it out of the note',
        sentence: `Writes ${gone} where the key stands; earlier versions of the design still hold it, so change the key as well.`,
        patch,
      },
    ];
  },
});
