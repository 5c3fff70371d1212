import { memo, useMemo, useState } from 'react';
import { useStore } from 'zustand';
import { SearchField } from '../../components/search-field.tsx';
import { elementKey } from '../../drawing/decorations.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { OutlineLine, type LineTools } from './outline-line.tsx';
import { setFilter, type OutlineViewStore } from './outline-view.ts';
import { createRowBlocks, type RowBlock } from './row-blocks.ts';
import { useOutlineRows } from './use-outline-rows.ts';
import { useTree, type Renaming } from './use-tree.ts';
import { selectedKeys, type Narrowed, type VisibleRow } from './visible-rows.ts';

/**
 * The design as a tree to be read and worked on without the sheet: what is selected here is selected there, and all
 * but placing by hand can be done from here.
 */
export function Outline({ view }: { readonly view: OutlineViewStore }) {
  const editable = useOpenState((state) => state.editable);
  const selection = useOpenState((state) => state.selection);
  const filter = useStore(view, (state) => state.filter);
  const shown = useOutlineRows(view);
  const { tools, onKeyDown, onBlur, menuKey, renaming } = useTree(view, shown);
  const ahead = useStore(view, (state) => state.ahead);
  const selected = useMemo(() => selectedKeys(ahead ?? selection), [ahead, selection]);
  const [cutIntoBlocks] = useState(createRowBlocks);
  const blocks = useMemo(() => cutIntoBlocks(shown.rows), [cutIntoBlocks, shown.rows]);
  const currentKey = shown.rows[shown.at]?.row.key;
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
        <div
          role="tree"
          aria-label="Outline"
          aria-multiselectable="true"
          tabIndex={-1}
          onKeyDown={onKeyDown}
          onBlur={onBlur}
        >
          {blocks.map((block) => {
            const holds = (key: string | undefined): boolean =>
              key !== undefined && block.rows.some(({ row }) => row.key === key);
            const isCurrent = holds(currentKey);
            return (
              <Block
                key={block.key}
                block={block}
                tools={tools}
                currentKey={isCurrent ? currentKey : undefined}
                selected={block.rows.some((visible) => isIn(selected, visible)) ? selected : nothing}
                menuKey={isCurrent ? menuKey : undefined}
                renaming={holds(renaming?.key) ? renaming : undefined}
                canAdd={editable}
              />
            );
          })}
        </div>
      )}
    </div>
  );
}

const nothing: ReadonlySet<string> = new Set();
const isIn = (selected: ReadonlySet<string>, { row }: VisibleRow): boolean =>
  selected.size > 0 && row.ref !== undefined && selected.has(elementKey(row.ref));

interface BlockProps {
  readonly block: RowBlock;
  readonly tools: LineTools;
  /** These only where they are about rows of this block, so that the others stay as they are. */
  readonly currentKey: string | undefined;
  readonly selected: ReadonlySet<string>;
  readonly menuKey: string | undefined;
  readonly renaming: Renaming | undefined;
  readonly canAdd: boolean;
}

/** The lines of one block. There may be thousands of rows: a key draws only the blocks that it leaves and enters. */
const Block = memo(function Block({
  block,
  tools,
  currentKey,
  selected,
  menuKey,
  renaming,
  canAdd,
}: BlockProps) {
  return block.rows.map((visible) => {
    const { key } = visible.row;
    return (
      <OutlineLine
        key={key}
        visible={visible}
        tools={tools}
        isCurrent={key === currentKey}
        isSelected={isIn(selected, visible)}
        isMenuOpen={key === currentKey && key === menuKey}
        renaming={key === renaming?.key ? renaming.path : undefined}
        canAdd={canAdd}
      />
    );
  });
});

const foundWords = ({ found, isCut, most }: Narrowed): string =>
  found === 0
    ? 'Nothing in this design says that.'
    : `${found} found${isCut ? `, the first ${most} shown: type more of it` : ''}`;
