import { typedAhead, type VisibleRow } from './visible-rows.ts';

/** What a key of the tree pattern asks for. */
export type TreeStep =
  | { readonly does: 'go'; readonly to: VisibleRow }
  | { readonly does: 'open' | 'shut'; readonly rows: readonly VisibleRow[] }
  | { readonly does: 'inspect' | 'rename' | 'remove' | 'menu' | 'toggle-selection' };

export interface PressedKey {
  readonly key: string;
  readonly shiftKey: boolean;
  readonly ctrlKey: boolean;
  readonly metaKey: boolean;
  readonly altKey: boolean;
}

/** The row that one stands under; undefined for the outermost. */
export const parentOf = (rows: readonly VisibleRow[], at: number): VisibleRow | undefined => {
  const level = rows[at]?.level ?? 1;
  for (let i = at - 1; i >= 0; i -= 1) if (rows[i]!.level < level) return rows[i];
  return undefined;
};

const siblingsOf = (rows: readonly VisibleRow[], at: number): readonly VisibleRow[] => {
  const level = rows[at]!.level;
  let from = at;
  while (from > 0 && rows[from - 1]!.level >= level) from -= 1;
  let to = at;
  while (to < rows.length - 1 && rows[to + 1]!.level >= level) to += 1;
  return rows.slice(from, to + 1).filter((row) => row.level === level);
};

// ARIA Authoring Practices Guide, tree view pattern, keyboard interaction; from memory. Shift and Ctrl as in its second
// model for selecting several: a move selects, Shift extends, Ctrl only moves.
/** What a key means on the row at `at`; undefined for keys that are not the tree's. `typed` is what was typed so far. */
export const treeStep = (
  rows: readonly VisibleRow[],
  at: number,
  pressed: PressedKey,
  typed: string,
): TreeStep | undefined => {
  const here = rows[at];
  if (here === undefined || pressed.altKey) return undefined;
  const go = (to: VisibleRow | undefined): TreeStep | undefined =>
    to === undefined ? undefined : { does: 'go', to };
  switch (pressed.key) {
    case 'ArrowDown':
      return go(rows[at + 1] ?? here);
    case 'ArrowUp':
      return go(rows[at - 1] ?? here);
    case 'Home':
      return go(rows[0]);
    case 'End':
      return go(rows.at(-1));
    case 'ArrowRight':
      if (here.isOpen === false) return { does: 'open', rows: [here] };
      return go(here.isOpen === true ? rows[at + 1] : here);
    case 'ArrowLeft':
      if (here.isOpen === true) return { does: 'shut', rows: [here] };
      return go(parentOf(rows, at) ?? here);
    case '*':
      return { does: 'open', rows: siblingsOf(rows, at).filter((row) => row.isOpen === false) };
    case 'Enter':
      return { does: 'inspect' };
    case 'F2':
      return { does: 'rename' };
    case 'Delete':
    case 'Backspace':
      return { does: 'remove' };
    case 'ContextMenu':
      return { does: 'menu' };
    case 'F10':
      return pressed.shiftKey ? { does: 'menu' } : undefined;
    case ' ':
      return { does: 'toggle-selection' };
    default:
      // '/' finds and '?' lists the keys, wherever the focus is.
      if (pressed.ctrlKey || pressed.metaKey || pressed.key.length !== 1 || /[/?]/.test(pressed.key))
        return undefined;
      return go(typedAhead(rows, at, typed) ?? here);
  }
};

/** Where the keyboard goes on when a row goes away with all beneath it: the next one beside or above it, else the one before. */
export const neighbourOf = (rows: readonly VisibleRow[], at: number): VisibleRow | undefined => {
  const level = rows[at]?.level ?? 1;
  const after = rows.slice(at + 1).find((row) => row.level <= level);
  return after !== undefined && after.level === level ? after : rows[at - 1];
};
