import { memo, type MouseEvent } from 'react';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu, type MenuGroup } from '../../components/menu.tsx';
import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import { SeverityCounts, severities } from '../../components/severity-mark.tsx';
import { classNames } from '../../lib/class-names.ts';
import type { OutlineGroup, OutlineRow } from './outline-row.ts';
import { RenameField } from './rename-field.tsx';
import { groupAddWords, mayBeNameless } from './row-menu.ts';
import { rowWords, type VisibleRow } from './visible-rows.ts';

/** What the lines ask of the tree; the same object from one drawing to the next. */
export interface LineTools {
  readonly pick: (row: OutlineRow, how: { readonly extend: boolean; readonly toggle: boolean }) => void;
  readonly focus: (row: OutlineRow) => void;
  readonly toggle: (visible: VisibleRow) => void;
  readonly openMenu: (row: OutlineRow) => void;
  readonly shutMenu: (row: OutlineRow) => void;
  readonly returnFocus: (row: OutlineRow) => void;
  readonly menuOf: (row: OutlineRow) => readonly MenuGroup[];
  readonly endRenaming: (row: OutlineRow, returnFocus: boolean) => void;
  readonly addTo: (group: OutlineGroup) => void;
}

interface OutlineLineProps {
  readonly visible: VisibleRow;
  readonly tools: LineTools;
  /** The row that Tab stops at. */
  readonly isCurrent: boolean;
  readonly isSelected: boolean;
  readonly isMenuOpen: boolean;
  /** Where its name is kept, while it is being changed. */
  readonly renaming: readonly string[] | undefined;
  readonly canAdd: boolean;
}

export const lineId = (key: string): string => `outline-${key}`;
const indentPx = 18;

/** One line of the outline: what it is, its name, its facts, its findings, and what can be done with it. */
export const OutlineLine = memo(function OutlineLine({
  visible,
  tools,
  isCurrent,
  isSelected,
  isMenuOpen,
  renaming,
  canAdd,
}: OutlineLineProps) {
  const { row, level, place, siblings, isOpen } = visible;
  const { kind, name, facts, counts, ref, group } = row;
  const addWords = group === undefined ? undefined : groupAddWords[group];
  const onClick = (event: MouseEvent): void => {
    tools.pick(row, { extend: event.shiftKey, toggle: event.ctrlKey || event.metaKey });
  };
  return (
    // The tree takes the keys of all its lines.
    // eslint-disable-next-line jsx-a11y/click-events-have-key-events
    <div
      id={lineId(row.key)}
      role="treeitem"
      aria-label={rowWords(row)}
      aria-level={level}
      aria-posinset={place}
      aria-setsize={siblings}
      aria-expanded={isOpen}
      aria-selected={ref === undefined ? undefined : isSelected}
      tabIndex={isCurrent ? 0 : -1}
      onFocus={(event) => event.target === event.currentTarget && tools.focus(row)}
      onClick={onClick}
      onContextMenu={(event) => {
        if (ref === undefined) return;
        event.preventDefault();
        tools.openMenu(row);
      }}
      className={classNames(
        'group flex min-h-29 scroll-mt-42 [contain-intrinsic-size:auto_29px] [content-visibility:auto] cursor-default items-center gap-x-8 border-b border-rule pr-6 -outline-offset-2 max-md:min-h-44',
        isSelected ? 'bg-blue-wash shadow-[inset_4px_0_0_var(--blue)]' : 'hover:bg-hover',
      )}
      style={{ paddingLeft: 8 + (level - 1) * indentPx }}
    >
      {/* The arrow keys do the same; a press here leaves the selection alone. */}
      {/* eslint-disable-next-line jsx-a11y/click-events-have-key-events, jsx-a11y/no-static-element-interactions */}
      <span
        className="flex h-24 w-20 shrink-0 items-center justify-center text-ink-2"
        onClick={(event) => {
          if (isOpen === undefined) return;
          event.stopPropagation();
          tools.toggle(visible);
        }}
      >
        {isOpen !== undefined && <Icon name={isOpen ? 'chevron-down' : 'chevron-right'} size={13} />}
      </span>
      <span className="flex min-w-0 flex-1 flex-wrap items-center gap-x-10">
        {ref?.collection === 'segments' && (
          <span aria-hidden="true">
            <SegmentSwatch letter={kind.replace('Segment ', '')} squarePx={15} cordPx={14} />
          </span>
        )}
        {group === undefined && <span className="text-note whitespace-nowrap text-ink-2">{kind}</span>}
        {renaming === undefined ? (
          <span className={classNames('break-words', group === undefined ? 'font-medium' : 'font-semibold')}>
            {name}
          </span>
        ) : (
          <RenameField
            path={renaming}
            subject={name}
            optional={mayBeNameless(row)}
            onDone={(returnFocus) => tools.endRenaming(row, returnFocus)}
          />
        )}
        <span className="text-note text-ink-2">{facts.join(', ')}</span>
        {canAdd && group !== undefined && addWords !== undefined && (
          <Button
            kind="accent"
            small
            tabIndex={isCurrent ? 0 : -1}
            onClick={(event) => {
              event.stopPropagation();
              tools.addTo(group);
            }}
          >
            {addWords}
          </Button>
        )}
      </span>
      {severities.some((severity) => counts[severity] > 0) && <SeverityCounts counts={counts} worded />}
      {ref === undefined ? (
        <span className="w-24 shrink-0" />
      ) : (
        <LineMenu row={row} tools={tools} isCurrent={isCurrent} isOpen={isMenuOpen} />
      )}
    </div>
  );
});

/** The button of a line's menu. The menu itself is there for the current line only: there may be a thousand lines. */
function LineMenu({
  row,
  tools,
  isCurrent,
  isOpen,
}: {
  readonly row: OutlineRow;
  readonly tools: LineTools;
  readonly isCurrent: boolean;
  readonly isOpen: boolean;
}) {
  const button = (
    <Button
      kind="quiet"
      small
      iconOnly
      tabIndex={isCurrent ? 0 : -1}
      aria-label={`More for ${row.name}`}
      aria-haspopup="menu"
      icon={<Icon name="more" />}
      className={classNames(
        'group-hover:opacity-100 focus-visible:opacity-100 max-md:opacity-100',
        !isCurrent && 'opacity-0',
      )}
      onClick={(event) => {
        event.stopPropagation();
        if (!isCurrent) tools.openMenu(row);
      }}
    />
  );
  if (!isCurrent) return button;
  return (
    // A press in the menu is no press on the line, though React takes it there.
    // eslint-disable-next-line jsx-a11y/no-static-element-interactions
    <span onClick={(event) => event.stopPropagation()} onKeyDown={(event) => event.stopPropagation()}>
      <Menu
        align="end"
        trigger={button}
        groups={isOpen ? tools.menuOf(row) : []}
        opened={{
          open: isOpen,
          onOpenChange: (open) => (open ? tools.openMenu(row) : tools.shutMenu(row)),
          returnFocus: () => tools.returnFocus(row),
        }}
      />
    </span>
  );
}
