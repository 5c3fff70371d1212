import type { Collection, Design } from '../model/design.ts';
import { collections } from '../model/design.ts';
import { sameJson } from '../model/merge-patch.ts';
import type { Change } from './change.ts';
import { layoutGroup } from './change.ts';
import { elementWords } from './element-names.ts';
import { sentenceCase, whatBecame } from './tell-properties.ts';

type Bag = Readonly<Record<string, unknown>>;

interface LayoutChanges {
  /** Places that come and go with an element, by its change. */
  readonly own: ReadonlyMap<Change, readonly (readonly string[])[]>;
  readonly others: readonly Change[];
}

/** What stands elsewhere on the sheet; `placed` are the elements that came or went, by collection and id. */
export const compareLayouts = (
  before: Design,
  after: Design,
  placed: ReadonlyMap<string, Change>,
): LayoutChanges => {
  const own = new Map<Change, (readonly string[])[]>();
  const others: Change[] = [];
  const tell = (path: readonly string[], sentence: string, ref: Change['ref'] = null): void => {
    others.push({
      kind: 'changed',
      ref,
      sentence: sentenceCase(sentence),
      group: layoutGroup,
      paths: [path],
    });
  };
  const comparePlaces = (
    path: readonly string[],
    was: Bag | undefined,
    is: Bag | undefined,
    collection: Collection,
    where: string,
  ): void => {
    const ids = [...new Set([...Object.keys(was ?? {}), ...Object.keys(is ?? {})])].sort();
    if (ids.length === 0 && (was === undefined) !== (is === undefined))
      tell(path, 'layout of the sheet begun anew');
    for (const id of ids) {
      const [from, to] = [was?.[id], is?.[id]];
      if (sameJson(from, to)) continue;
      const at = [...path, id];
      const change = placed.get(`${collection}/${id}`);
      if (change !== undefined) own.set(change, [...(own.get(change) ?? []), at]);
      else if (hasEntry(after, collection, id))
        tell(at, `${elementWords(after, collection, id)} ${whatMoved(from, to)}${where}`, { collection, id });
      else tell(at, `place of something that is gone removed${where}`);
    }
  };
  const [old, now] = [before.layout as Bag, after.layout as Bag];
  for (const key of [...new Set([...Object.keys(old), ...Object.keys(now)])].sort()) {
    const [was, is] = [old[key], now[key]];
    const path = ['layout', key];
    if (sameJson(was, is)) continue;
    if (isCollection(key)) comparePlaces(path, was as Bag | undefined, is as Bag | undefined, key, '');
    else if (key === 'furtherSheets') {
      const numbers = [
        ...new Set([...Object.keys((was ?? {}) as Bag), ...Object.keys((is ?? {}) as Bag)]),
      ].sort();
      if (numbers.length === 0) tell(path, 'layout of further sheets begun anew');
      for (const number of numbers) {
        const [from, to] = [was, is].map((sheets) => (sheets as { [n: string]: Bag } | undefined)?.[number]);
        if (sameJson(from, to)) continue;
        if ((from === undefined) !== (to === undefined))
          tell([...path, number], `sheet ${number} ${to === undefined ? 'removed' : 'added'}`);
        comparePlaces(
          [...path, number, 'transports'],
          from?.['transports'] as Bag | undefined,
          to?.['transports'] as Bag | undefined,
          'transports',
          ` on sheet ${number}`,
        );
      }
    } else {
      const words = key === 'sheet' ? 'size of the sheet' : 'largest sheet that tidying may take';
      tell(path, `${words} ${whatBecame({}, was, is, String)}`);
    }
  }
  return { own, others };
};

const isCollection = (key: string): key is Collection => (collections as readonly string[]).includes(key);

const hasEntry = (design: Design, collection: Collection, id: string): boolean =>
  Object.hasOwn(design[collection], id);

const states = [
  ['locked', 'locked in its place', 'unlocked'],
  ['collapsed', 'collapsed', 'opened up'],
] as const;

const whatMoved = (was: unknown, is: unknown): string => {
  const [from, to] = [(was ?? {}) as Bag, (is ?? {}) as Bag];
  for (const [key, on, off] of states)
    if (sameJson({ ...from, [key]: undefined }, { ...to, [key]: undefined }))
      return to[key] === true ? on : off;
  return 'moved on the sheet';
};
