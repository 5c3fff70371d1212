import type { Design, ElementRef } from '../model/design.ts';
import { sameJson } from '../model/merge-patch.ts';
import type { Change } from './change.ts';
import { groupOf } from './change.ts';
import {
  circuitWords,
  elementName,
  elementWords,
  endPlace,
  plugName,
  portWords,
  ruleWords,
} from './element-names.ts';
import { propertyWords } from './property-words.ts';
import type { Told } from './tell-properties.ts';
import { sentenceCase, tellProperties, whatBecame } from './tell-properties.ts';

type Bag = Readonly<Record<string, unknown>>;
type Parts = Readonly<Record<string, unknown>>;

/** What differs between the two states of an element that both designs have. */
export const compareEntries = (before: Design, after: Design, ref: ElementRef): readonly Change[] => {
  const { collection, id } = ref;
  const group = groupOf(after, ref);
  const change = (told: OwnChange): Change => ({
    ref,
    group,
    ...told,
    sentence: sentenceCase(told.sentence),
  });
  const was = before[collection][id] as Bag;
  const is = after[collection][id] as Bag;
  const subject = elementWords(after, collection, id);
  const path = [collection, id];
  const parts = partsOf(ref);
  const ends = endsOf(before, after, ref);
  const own = tellProperties({
    before,
    after,
    place: collection,
    path,
    was,
    is,
    without: [...parts.map(({ key }) => key), ...(ends === undefined ? [] : ['a', 'b'])],
  });
  return [
    ...own.map((told) =>
      change({
        kind: 'changed',
        paths: [told.path],
        sentence: told.property === 'name' ? renamed(before, after, ref) : sentenceOf(told, subject),
      }),
    ),
    ...(ends ?? []).flatMap(({ end, where }) =>
      collection === 'links'
        ? plugChange(before, after, id, end).map((sentence) =>
            change({ kind: 'changed', paths: [[...path, end]], sentence }),
          )
        : tellProperties({
            before,
            after,
            place: collection,
            path: [...path, end],
            was: was[end],
            is: is[end],
          }).map((told) =>
            change({
              kind: 'changed',
              paths: [told.path],
              sentence: `${sentenceOf(told, subject)} at ${where}`,
            }),
          ),
    ),
    ...parts.flatMap((part) => compareParts(before, after, ref, part).map(change)),
  ];
};

const sentenceOf = ({ words, said, property }: Told, subject: string): string =>
  property === 'rank' ? `${subject} moved in the order` : `${words} of ${subject} ${said}`;

const renamed = (before: Design, after: Design, { collection, id }: ElementRef): string =>
  `${elementWords(before, collection, id)} renamed ${elementName(after, collection, id)}`;

/** A change of the element itself unless another part of it is named. */
type OwnChange = Omit<Change, 'group' | 'ref'> & { readonly ref?: ElementRef };

interface End {
  readonly end: 'a' | 'b';
  readonly where: string;
}

/** The two ends that an element's properties stand at, and where these are; undefined for elements without. */
const endsOf = (
  before: Design,
  after: Design,
  { collection, id }: ElementRef,
): readonly End[] | undefined => {
  const at = (devices: { readonly a: string; readonly b: string }): readonly End[] =>
    (['a', 'b'] as const).map((end) => ({ end, where: endPlace(after, devices, end) }));
  if (collection === 'associations') {
    const { a, b } = after.associations[id]!;
    return at({ a: a.device, b: b.device });
  }
  if (collection === 'tunnels') {
    const { a, b } = after.tunnels[id]!;
    const deviceOf = (endpoint: string) => after.endpoints[endpoint]?.device ?? '';
    return at({ a: deviceOf(a.endpoint), b: deviceOf(b.endpoint) });
  }
  const isCable = before.links[id]?.kind === 'cable' || after.links[id]?.kind === 'cable';
  return collection === 'links' && isCable ? at({ a: '', b: '' }) : undefined;
};

const plugChange = (before: Design, after: Design, id: string, end: 'a' | 'b'): readonly string[] => {
  const plugIn = (design: Design) => {
    const link = design.links[id];
    return link?.kind === 'cable' ? link[end] : undefined;
  };
  const [was, is] = [plugIn(before), plugIn(after)];
  if (sameJson(was, is)) return [];
  const said = whatBecame({}, was, is, (value, isAfter) =>
    plugName(isAfter ? after : before, value as NonNullable<typeof was>),
  );
  return [`One end of ${elementWords(after, 'links', id)} ${said}`];
};

interface PartKind {
  /** The member of the entry that holds the parts. */
  readonly key: string;
  readonly words: (design: Design, part: string) => string;
  readonly ref?: (part: string) => ElementRef;
}

const partsOf = ({ collection, id }: ElementRef): readonly PartKind[] => {
  const of = (design: Design) => elementWords(design, collection, id);
  switch (collection) {
    case 'devices':
      return [
        {
          key: 'ports',
          words: (design, port) => portWords(design, id, port),
          ref: (port) => ({ collection, id, port }),
        },
      ];
    case 'forwarders':
      return [
        {
          key: 'circuits',
          words: (design, circuit) => `${circuitWords(design, id, circuit)} on ${of(design)}`,
        },
        {
          key: 'policy',
          words: (design, rule) => `${ruleWords(design, id, rule)} of ${of(design)}`,
        },
      ];
    case 'segments':
      return [
        {
          key: 'sites',
          words: (design, site) => `${of(design)} at ${elementName(design, 'sites', site)}`,
        },
      ];
    default:
      return [];
  }
};

const compareParts = (
  before: Design,
  after: Design,
  { collection, id }: ElementRef,
  { key, words, ref }: PartKind,
): readonly OwnChange[] => {
  const partsIn = (design: Design): Parts | undefined =>
    (design[collection] as { readonly [id: string]: Bag })[id]?.[key] as Parts | undefined;
  const [was, is] = [partsIn(before), partsIn(after)];
  const path = [collection, id, key];
  const ids = [...new Set([...Object.keys(was ?? {}), ...Object.keys(is ?? {})])].sort();
  const refOf = (part: string) => (ref === undefined ? {} : { ref: ref(part) });
  const presence =
    (was === undefined) !== (is === undefined) && ids.length === 0
      ? [
          {
            kind: 'changed' as const,
            paths: [path],
            sentence: `${propertyWords[collection]![key]!.words} of ${elementWords(after, collection, id)} ${is === undefined ? 'no longer given' : 'given'}`,
          },
        ]
      : [];
  return [
    ...presence,
    ...ids.flatMap((part): readonly OwnChange[] => {
      const [old, now] = [was?.[part], is?.[part]];
      const at = [...path, part];
      if (old === undefined)
        return [
          { kind: 'added' as const, paths: [at], sentence: `${words(after, part)} added`, ...refOf(part) },
        ];
      if (now === undefined)
        return [
          {
            kind: 'removed' as const,
            paths: [at],
            sentence: `${words(before, part)} removed`,
            ...refOf(part),
          },
        ];
      return tellProperties({
        before,
        after,
        place: `${collection}.${key}`,
        path: at,
        was: old,
        is: now,
        wasIn: before[collection][id],
        isIn: after[collection][id],
      }).map((told) => ({
        kind: 'changed' as const,
        paths: [told.path],
        sentence: sentenceOf(told, words(after, part)),
        ...refOf(part),
      }));
    }),
  ];
};
