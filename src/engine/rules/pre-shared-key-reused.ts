import type { MergePatch } from '../model/merge-patch.ts';
import type { DesignFacts } from '../network/network.ts';
import { ends } from '../network/network.ts';
import { defineRule } from './define-rule.ts';
import { counted, listed, sentenceCase } from './wording.ts';

/** The vault entry that both ends of an association name; an association at odds with itself uses none. */
const sharedEntry = (association: DesignFacts['associations'][string]): string | undefined => {
  const named = ends.flatMap((end) => {
    const { authentication } = association[end];
    return authentication === undefined
      ? []
      : [authentication.method === 'pre-shared-key' ? authentication.vaultEntry : undefined];
  });
  return named.every((entry) => entry === named[0]) ? named[0] : undefined;
};

const usersByEntry = (design: DesignFacts): ReadonlyMap<string, readonly string[]> => {
  const users = new Map<string, string[]>();
  for (const id of Object.keys(design.associations).sort()) {
    const entry = sharedEntry(design.associations[id]!);
    if (entry !== undefined) users.set(entry, [...(users.get(entry) ?? []), id]);
  }
  return users;
};

export const preSharedKeyReused = defineRule({
  id: 'pre-shared-key-reused',
  title: 'Every association has a key of its own',
  severity: 'degrading',
  looksAt: ['associations'],
  why: 'Whoever takes the key from one gateway can pass for any other that uses it, and a new key has to be set everywhere at once.',
  seen: 'Nothing, until one site’s gateway is lost or stolen; then every site needs a new key on the same day.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.15' }, 'common practice, no source'],
  messages: {
    reused: {
      words: 'key used twice',
      sentence: (v: { readonly count: number; readonly users: string; readonly entry: string }) =>
        `${v.count > 2 ? sentenceCase(counted(v.count, 'association', 'associations')) : v.users} share the key "${v.entry}"`,
    },
  },
  check: ({ design }) =>
    [...usersByEntry(design)].flatMap(([entry, ids]) => {
      if (ids.length < 2) return [];
      const refs = ids.map((id) => ({ collection: 'associations' as const, id }));
      return [
        {
          message: 'reused',
          values: {
            count: ids.length,
            users: listed(ids.map((id) => design.associations[id]!.name)),
            entry,
          },
          elements: refs,
          properties: refs.flatMap((ref) =>
            ends
              .filter((end) => design.associations[ref.id]![end].authentication !== undefined)
              .map((end) => ({ ref, path: [end, 'authentication', 'vaultEntry'] })),
          ),
          basis: [entry, ...ids],
        },
      ];
    }),
  fixes: (fault, { design }) => {
    const taken = new Set(
      Object.values(design.associations).flatMap((association) =>
        ends.flatMap((end) => {
          const { authentication } = association[end];
          return authentication?.method === 'pre-shared-key' ? [authentication.vaultEntry] : [];
        }),
      ),
    );
    const associations: { [id: string]: MergePatch } = {};
    for (const { id } of fault.elements.slice(1)) {
      const association = design.associations[id]!;
      const stem = `ipsec ${association.name}`.slice(0, 76);
      let entry = stem;
      for (let n = 2; taken.has(entry); n += 1) entry = `${stem} ${n}`;
      taken.add(entry);
      associations[id] = Object.fromEntries(
        ends
          .filter((end) => association[end].authentication !== undefined)
          .map((end) => [end, { authentication: { vaultEntry: entry } }]),
      );
    }
    return [
      {
        id: 'own-keys',
        label: 'A key for each',
        sentence: `Leaves "${fault.values.entry}" to the first and names a new vault entry for each of the others, which you must fill.`,
        patch: { associations },
      },
    ];
  },
});
