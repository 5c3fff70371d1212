import type { Collection } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { joinPatches } from '../model/merge-patch.ts';
import type { DesignFacts, Network } from '../network/network.ts';
import { ends, perObject } from '../network/network.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { countWord, listed, sentenceCase } from './wording.ts';

type Named =
  'sites' | 'devices' | 'transports' | 'associations' | 'tunnels' | 'segments' | 'endpoints' | 'forwarders';

const nouns: { readonly [C in Named]: string } = {
  sites: 'sites',
  devices: 'devices',
  transports: 'transports',
  associations: 'associations',
  tunnels: 'tunnels',
  segments: 'segments',
  endpoints: 'endpoints',
  forwarders: 'forwarders',
};
const collectionsWithNames = Object.keys(nouns) as readonly Named[];

const spelt = (name: string): string => name.trim().toLowerCase();

type Entries = DesignFacts[Named];

/** Where a name must be the only one of its kind: in the whole design, or among its neighbours. */
const scopeOf = (entry: Entries[string]): string => {
  // Endpoints and forwarders.
  if ('device' in entry) return entry.device;
  // 'camera-1' at every site is usual; a gateway's or switch's name is looked for in the whole design.
  return 'kind' in entry && entry.kind === 'host' ? entry.site : '';
};

const gather = (marks: Iterable<readonly [mark: string, id: string]>): readonly (readonly string[])[] => {
  const first = new Map<string, string>();
  // Most names are used once: a set is made at the second use only.
  const byMark = new Map<string, Set<string>>();
  for (const [mark, id] of marks) {
    const before = first.get(mark);
    if (before === undefined) first.set(mark, id);
    else byMark.set(mark, (byMark.get(mark) ?? new Set([before])).add(id));
  }
  return [...byMark.values()].filter((ids) => ids.size > 1).map((ids) => [...ids].sort());
};

/** An entry's name as it is compared, in its scope. */
const markOf = perObject((entry: Entries[string]): string => `${scopeOf(entry)} ${spelt(entry.name)}`);

const namesakes = perObject((entries: Entries): readonly (readonly string[])[] =>
  gather(Object.entries(entries).map(([id, entry]) => [markOf(entry), id])),
);

const identities = ({ design }: Network): readonly (readonly [identity: string, device: string])[] =>
  Object.values(design.associations).flatMap((association) =>
    ends.flatMap((end) => {
      const { identity, device } = association[end];
      return identity === undefined ? [] : [[spelt(identity), device] as const];
    }),
  );

const identityOf = (network: Network, device: string, among: string): string | undefined =>
  (network.associationsByDevice.get(device) ?? [])
    .map(({ association, end }) => network.design.associations[association]![end].identity)
    .find((identity) => identity !== undefined && spelt(identity) === among);

/** The name with the lowest number after it that makes it new. */
const numbered = (name: string, taken: ReadonlySet<string>): string => {
  for (let n = 2; ; n += 1) {
    const candidate = `${name.slice(0, 74)}-${n}`;
    if (!taken.has(spelt(candidate))) return candidate;
  }
};

const freeLetter = (design: DesignFacts, taken: readonly string[]): string => {
  const used = new Set([...Object.values(design.segments).map(({ letter }) => letter), ...taken]);
  const alphabet = [...'ABCDEFGHIJKLMNOPQRSTUVWXYZ'];
  return [...alphabet, ...alphabet.flatMap((x) => alphabet.map((y) => x + y))].find(
    (letter) => !used.has(letter),
  )!;
};

const messages = {
  name: {
    words: 'name used twice',
    sentence: (v: { readonly count: number; readonly noun: string; readonly name: string }) =>
      `${sentenceCase(countWord(v.count))} ${v.noun} are called ${v.name}`,
  },
  letter: {
    words: 'letter used twice',
    sentence: (v: { readonly names: string; readonly letter: string }) =>
      `${v.names} have the letter ${v.letter}`,
    why: 'The letter is what tells segments apart on the sheet, in print above all.',
    seen: 'Two cords look the same; somebody patches the wrong one.',
  },
  identity: {
    words: 'identity used twice',
    sentence: (v: { readonly identity: string; readonly devices: string }) =>
      `${v.devices} identify themselves as ${v.identity}`,
    why: 'A gateway takes the second peer for the first: it may pick the wrong keys, and an initial contact from the one deletes the association of the other.',
    seen: 'Two associations take turns: whenever the one comes up the other goes down.',
  },
};

export const duplicateName = defineRule({
  id: 'duplicate-name',
  title: 'Names and identities are used once',
  severity: 'degrading',
  looksAt: [...collectionsWithNames] as unknown as readonly [Collection, ...Collection[]],
  why: 'Whoever reads the plan, a log or an alarm takes one for the other.',
  seen: 'The right commands are entered on the wrong device.',
  sources: ['common practice, no source', { document: 'RFC 7296', clause: 'section 2.4' }],
  messages,
  check: (network): readonly Fault<typeof messages>[] => {
    const { design } = network;
    const names = collectionsWithNames.flatMap((collection) =>
      namesakes(design[collection]).map((ids): Fault<typeof messages> => {
        const refs = ids.map((id) => ({ collection, id }));
        const name = design[collection][ids[0]!]!.name;
        return {
          message: 'name',
          values: { count: ids.length, noun: nouns[collection], name },
          elements: refs,
          identity: ['name', collection, ...ids],
          properties: refs.map((ref) => ({ ref, path: ['name'] })),
          basis: [spelt(name)],
          ...(collection === 'devices'
            ? {}
            : {
                severity: 'advisory',
                severityReason: 'No device acts on this name; only readers are misled.',
              }),
        };
      }),
    );
    const letters = gather(Object.entries(design.segments).map(([id, { letter }]) => [letter, id])).map(
      (ids): Fault<typeof messages> => {
        const refs = ids.map((id) => ({ collection: 'segments' as const, id }));
        const { letter } = design.segments[ids[0]!]!;
        return {
          message: 'letter',
          values: { names: listed(ids.map((id) => design.segments[id]!.name)), letter },
          elements: refs,
          identity: ['letter', ...ids],
          properties: refs.map((ref) => ({ ref, path: ['letter'] })),
          basis: [letter],
          severity: 'advisory',
          severityReason: 'No device acts on this letter; only readers are misled.',
        };
      },
    );
    const shared = gather(identities(network)).map((devices): Fault<typeof messages> => {
      const identity = identities(network).find(
        ([text, device]) =>
          device === devices[0] && devices.every((other) => identityOf(network, other, text) !== undefined),
      )![0];
      const uses = devices.flatMap((device) =>
        (network.associationsByDevice.get(device) ?? []).filter(({ association, end }) => {
          const own = design.associations[association]![end].identity;
          return own !== undefined && spelt(own) === identity;
        }),
      );
      return {
        message: 'identity',
        values: {
          identity: identityOf(network, devices[0]!, identity)!,
          devices: listed(devices.map((id) => design.devices[id]!.name)),
        },
        elements: devices.map((id) => ({ collection: 'devices', id })),
        identity: ['identity', ...devices],
        properties: uses.map(({ association, end }) => ({
          ref: { collection: 'associations', id: association },
          path: [end, 'identity'],
        })),
        basis: [identity],
        severity: 'blocking',
        severityReason: 'Gateways choose keys by this identity.',
      };
    });
    return [...names, ...letters, ...shared];
  },
  fixes: (fault, network) => {
    const { design } = network;
    const [, ...others] = fault.elements;
    const renamed: string[] = [];
    const patches = others.map(({ collection, id }): MergePatch => {
      if (fault.message === 'letter') {
        const letter = freeLetter(design, renamed);
        renamed.push(letter);
        return { segments: { [id]: { letter } } };
      }
      if (fault.message === 'name') {
        const taken = Object.values(design[collection as Named]).map((entry) => spelt(entry.name));
        const name = numbered(fault.values.name, new Set([...taken, ...renamed.map(spelt)]));
        renamed.push(name);
        return { [collection]: { [id]: { name } } };
      }
      const [, ...domain] = fault.values.identity.split('.');
      const taken = new Set([...identities(network).map(([identity]) => identity), ...renamed.map(spelt)]);
      const own = [spelt(design.devices[id]!.name).replaceAll(/[^a-z0-9-]+/g, '-'), ...domain]
        .join('.')
        .slice(0, 80);
      const identity = taken.has(own) ? numbered(own, taken) : own;
      renamed.push(identity);
      const associations: { [association: string]: { [end: string]: MergePatch } } = {};
      for (const { association, end } of network.associationsByDevice.get(id) ?? []) {
        const before = design.associations[association]![end].identity;
        if (before !== undefined && spelt(before) === spelt(fault.values.identity))
          associations[association] = { ...associations[association], [end]: { identity } };
      }
      return { associations };
    });
    const many = renamed.length > 1;
    return [
      {
        id: 'rename',
        label:
          fault.message === 'letter'
            ? `Use ${listed(renamed)}`
            : many
              ? 'Rename all but one'
              : `Rename one to ${renamed[0]!}`,
        sentence: `Leaves the first as it is and renames the ${many ? 'others' : 'second'} to ${listed(renamed)}.`,
        patch: joinPatches(design, patches),
      },
    ];
  },
});
