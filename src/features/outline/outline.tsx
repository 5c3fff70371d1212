import { useMemo } from 'react';
import { useStore } from 'zustand';
import { SearchField } from '../../components/search-field.tsx';
import { elementKey } from '../../drawing/decorations.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { OutlineLine } from './outline-line.tsx';
import { setFilter, type OutlineViewStore } from './outline-view.ts';
import { useOutlineRows } from './use-outline-rows.ts';
import { useTree } from './use-tree.ts';
import { selectedKeys, type Narrowed } from './visible-rows.ts';

/**
 * The design as a tree to be read and worked on without the sheet: what is selected here is selected there, and all
 * but placing by hand can be done from here.
 */
export function Outline({ view }: { readonly view: OutlineViewStore }) {
  const editable = useOpenState((state) => state.editable);
  const selection = useOpenState((state) => state.selection);
  const filter = useStore(view, (state) => state.filter);
  const shown = useOutlineRows(view);
  const { tools, onKeyDown, menuKey, renaming } = useTree(view, shown);
  const selected = useMemo(() => selectedKeys(selection), [selection]);
  return (
    <div>
      <div className="sticky top-0 z-10 flex flex-wrap items-center gap-x-14 gap-y-4 border-b border-rule-2 bg-panel px-8 py-5">
        <SearchField
          label="Name, address, VNI, VLAN or fault"
          value={filter}
          onChange={(text) => setFilter(view, text)}
          className="w-280 max-w-full"
        />
        <p role="status" className="text-note text-ink-2">
          {shown.narrowed === undefined ? '' : foundWords(shown.narrowed)}
        </p>
      </div>
      {shown.rows.length > 0 && (
        <div role="tree" aria-label="Outline" aria-multiselectable="true" tabIndex={-1} onKeyDown={onKeyDown}>
          {shown.rows.map((visible, at) => (
            <OutlineLine
              key={visible.row.key}
              visible={visible}
              tools={tools}
              isCurrent={at === shown.at}
              isSelected={visible.row.ref !== undefined && selected.has(elementKey(visible.row.ref))}
              isMenuOpen={at === shown.at && menuKey === visible.row.key}
              renaming={renaming?.key === visible.row.key ? renaming.path : undefined}
              canAdd={editable}
            />
          ))}
        </div>
      )}
    </div>
  );
}

const foundWords = ({ found, isCut, most }: Narrowed): string =>
  found === 0
    ? 'Nothing in this design says that.'
    : `${found} found${isCut ? `, the first ${most} shown: type more of it` : ''}`;
