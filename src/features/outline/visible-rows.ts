import { elementKey } from '../../drawing/decorations.ts';
import type { ElementRef } from '../../engine/model/design.ts';
import { countWords } from './finding-tally.ts';
import type { OutlineRow } from './outline-row.ts';
import { keyStep } from './outline-tree.ts';

/** A row as it stands in the list that is shown. */
export interface VisibleRow {
  readonly row: OutlineRow;
  /** From 1. */
  readonly level: number;
  /** Its place among its siblings, from 1, and how many these are. */
  readonly place: number;
  readonly siblings: number;
  /** Undefined where nothing stands beneath it. */
  readonly isOpen: boolean | undefined;
}

/** Rows that a person opened or closed; the others are as `opensAtFirst` has them. */
export type Openings = ReadonlyMap<string, boolean>;

// Beyond so many the sites' devices would push all else out of sight.
const mostOpenSites = 12;

/** Which rows are open before anybody touched them: the groups, and the sites while they are few. */
export const opensAtFirst =
  (roots: readonly OutlineRow[]) =>
  (row: OutlineRow): boolean =>
    row.group !== undefined ||
    (row.isOwn &&
      row.ref?.collection === 'sites' &&
      (roots.find(({ group }) => group === 'sites')?.children.length ?? 0) <= mostOpenSites);

/** The rows that can be seen, from the top. */
export const visibleRows = (
  roots: readonly OutlineRow[],
  isOpen: (row: OutlineRow) => boolean,
): readonly VisibleRow[] => {
  const seen: VisibleRow[] = [];
  const walk = (rows: readonly OutlineRow[], level: number): void => {
    rows.forEach((row, i) => {
      const open = row.children.length === 0 ? undefined : isOpen(row);
      seen.push({ row, level, place: i + 1, siblings: rows.length, isOpen: open });
      if (open === true) walk(row.children, level + 1);
    });
  };
  walk(roots, 1);
  return seen;
};

/** All that a row says, as one text. */
export const rowWords = ({ kind, name, facts, counts, group }: OutlineRow): string =>
  [group === undefined ? `${kind} ${name}` : name, ...facts, countWords(counts)].filter(Boolean).join(', ');

export interface Narrowed {
  readonly roots: readonly OutlineRow[];
  /** Rows that are open because something beneath them was found. */
  readonly opened: ReadonlySet<string>;
  readonly found: number;
  /** More was found than the most that is shown. */
  readonly isCut: boolean;
  readonly most: number;
}

// More rows than anybody reads through; who looks for one of them types another letter.
const mostFound = 400;

/** The rows that hold every word of a text, with the rows that lead to them. Group heads lead only. */
export const narrow = (roots: readonly OutlineRow[], text: string): Narrowed => {
  const wanted = text.toLowerCase().split(/\s+/).filter(Boolean);
  const opened = new Set<string>();
  let found = 0;
  const holds = (row: OutlineRow): boolean => {
    if (row.group !== undefined) return false;
    const words = rowWords(row).toLowerCase();
    return wanted.every((word) => words.includes(word));
  };
  const keep = (row: OutlineRow): OutlineRow | undefined => {
    const isHit = holds(row);
    if (isHit) found += 1;
    const isShown = isHit && found <= mostFound;
    const kept = row.children.flatMap((child) => keep(child) ?? []);
    if (kept.length > 0) {
      opened.add(row.key);
      return { ...row, children: kept };
    }
    return isShown ? row : undefined;
  };
  const narrowed = roots.flatMap((root) => keep(root) ?? []);
  return { roots: narrowed, opened, found, isCut: found > mostFound, most: mostFound };
};

/** The keys of the rows above one, the outermost first. */
export const keysAbove = (key: string): readonly string[] => {
  const steps = key.split(keyStep);
  return steps.slice(0, -1).map((_, i) => steps.slice(0, i + 1).join(keyStep));
};

/** The row where an element stands: its own before those that only name it, an open port of a pair before none. */
export const keyOfElement = (roots: readonly OutlineRow[], ref: ElementRef): string | undefined => {
  const wanted = selectedKeys([ref]);
  let named: string | undefined;
  const find = (rows: readonly OutlineRow[]): string | undefined => {
    for (const row of rows) {
      if (row.ref !== undefined && wanted.has(elementKey(row.ref))) {
        if (row.isOwn) return row.key;
        named ??= row.key;
      }
      const below = find(row.children);
      if (below !== undefined) return below;
    }
    return undefined;
  };
  return find(roots) ?? named;
};

/** The keys of all rows' elements that a selection means: a pair's port without its member means that of both. */
export const selectedKeys = (selection: readonly ElementRef[]): ReadonlySet<string> =>
  new Set(
    selection.flatMap(({ collection, id, port, member }) => {
      if (port === undefined)
        return [elementKey({ collection, id, ...(member === undefined ? {} : { member }) })];
      const whole = elementKey({ collection, id, port });
      return member === undefined
        ? [
            whole,
            elementKey({ collection, id, port, member: 1 }),
            elementKey({ collection, id, port, member: 2 }),
          ]
        : [whole, elementKey({ collection, id, port, member })];
    }),
  );

/** The next row whose name begins with what was typed, from the row after `from` and round; the same row while more is typed. */
export const typedAhead = (
  rows: readonly VisibleRow[],
  from: number,
  typed: string,
): VisibleRow | undefined => {
  const wanted = typed.toLowerCase();
  const start = typed.length === 1 ? from + 1 : Math.max(from, 0);
  const round = [...rows.slice(start), ...rows.slice(0, start)];
  return round.find(({ row }) => row.name.toLowerCase().startsWith(wanted));
};
