import { useRef } from 'react';
import { Menu, type MenuGroup, type MenuItem } from '../components/menu.tsx';
import type { Design } from '../engine/model/design.ts';
import type { Point } from '../drawing/geometry.ts';
import { useNumbering } from '../workspace/checks-context.tsx';
import { newEntryId, useOpenDesign } from '../workspace/open-design-context.tsx';
import { pasteParts, type Parts } from '../workspace/operations/copy-parts.ts';
import { kindOf, nameOf } from '../workspace/operations/name-of.ts';
import { useClipboard } from './actions/clipboard.ts';
import { elementMenu } from './actions/element-menu.ts';
import { useExtraActions } from './actions/extra-actions.ts';
import { farEnds } from './actions/far-ends.ts';
import { keyWords, shortcuts, type CommandId } from './commands/shortcuts.ts';
import { siteOf, type Commands } from './commands/use-commands.ts';
import { editNote, openMenu, useDesk, type OpenedMenu } from './desk-state.ts';
import { siteAt, standingOf } from './flow-changes-to-patch.ts';
import { useDrawn } from './geometry-context.tsx';
import { placePart, type PlacedPart } from './place-part.ts';
import { useView } from './use-view.ts';
import { useViewChoice } from './use-view-choice.ts';

/** The menu that a right press or the menu key opens, on an element or on the empty sheet. */
export function SheetMenu({ commands }: { readonly commands: Commands }) {
  const menu = useDesk((state) => state.menu);
  if (menu === undefined) return null;
  return <OpenSheetMenu key={`${menu.at.x} ${menu.at.y}`} menu={menu} commands={commands} />;
}

/** By how much copied parts move so that their top left corner comes to a point. */
const pasteBy = ({ places }: Parts, at: Point): { readonly dx: number; readonly dy: number } => {
  const all = [places.devices, places.sites, places.notes].flatMap((of) => Object.values(of));
  return {
    dx: Math.round(at.x - Math.min(...all.map(({ x }) => x))),
    dy: Math.round(at.y - Math.min(...all.map(({ y }) => y))),
  };
};

const placed: readonly (readonly [PlacedPart, string])[] = [
  ['firewall', 'Firewall'],
  ['ha-pair', 'HA pair'],
  ['router', 'Router'],
  ['switch', 'Switch'],
  ['host', 'Host'],
  ['site', 'Site'],
  ['transport', 'Transport'],
  ['note', 'Note'],
];

function OpenSheetMenu({ menu, commands }: { readonly menu: OpenedMenu; readonly commands: Commands }) {
  const open = useOpenDesign();
  const numbering = useNumbering();
  const { settled } = useDrawn();
  const view = useView();
  const { isWhole } = useViewChoice();
  const extra = useExtraActions();
  const parts = useClipboard((state) => state.parts);
  const opener = useRef(document.activeElement);
  const { document: design, selection, editable } = open.store.getState();
  const { actions, run } = commands;

  const does = (id: CommandId, label: string = shortcuts[id].words): MenuItem => ({
    label,
    detail: keyWords(id),
    onSelect: run[id],
  });
  const pasteItem = (at: Point, site: string | undefined): readonly MenuItem[] =>
    parts === undefined
      ? []
      : [
          {
            label: 'Paste here',
            detail: keyWords('paste'),
            onSelect: () =>
              void actions.run(
                pasteParts(
                  open.store.getState().document,
                  parts,
                  pasteBy(parts, at),
                  site,
                  newEntryId,
                  numbering,
                ),
              ),
          },
        ];
  const sheetGroups = (): readonly MenuGroup[] => {
    const at = view.fromScreen(menu.at);
    const site = siteAt(settled, at);
    const put = (part: PlacedPart): void => {
      const done = actions.run(
        placePart(open.store.getState().document, settled, part, at, newEntryId, numbering),
      );
      if (done && part === 'note') editNote(open.store.getState().selection[0]?.id, true);
    };
    const name = site === undefined ? undefined : design.sites[site]?.name;
    return [
      ...(editable
        ? [
            {
              actions: [
                {
                  label: name === undefined ? 'Put down here' : `Put down in ${name}`,
                  actions: placed.map(([part, label]) => ({ label, onSelect: () => put(part) })),
                },
                ...pasteItem(at, site),
              ],
            },
          ]
        : []),
      { actions: [does('selectAll'), does('find')] },
      {
        actions: [
          does('fit'),
          ...(isWhole ? [] : [does('everything', 'Show everything again')]),
          ...(editable ? [does('tidy')] : []),
        ],
      },
      { actions: [does('keys')] },
    ];
  };
  const elementGroups = (): readonly MenuGroup[] => {
    const { ref } = menu;
    if (ref === undefined) return sheetGroups();
    if (menu.of === 'ways')
      return [
        {
          actions: farEnds(design, ref).map((far) => ({
            label: far.words,
            onSelect: () => actions.follow(far),
          })),
        },
      ];
    const groups = elementMenu(
      { ref },
      { design, standing: standingOf(settled), selection, editable, extra },
      actions,
    );
    const isPlace = ref.collection === 'sites' || ref.collection === 'devices';
    const paste = editable && isPlace ? pasteItem(view.fromScreen(menu.at), siteOf(design, ref)) : [];
    return paste.length === 0 ? groups : [...groups.slice(0, -1), { actions: paste }, ...groups.slice(-1)];
  };
  const heading = headingOf(design, menu, selection.length);
  return (
    <Menu
      trigger={
        <button
          type="button"
          tabIndex={-1}
          aria-label={heading === undefined ? 'Menu of the sheet' : `Menu of ${heading}`}
          className="pointer-events-none fixed size-1 opacity-0"
          style={{ left: menu.at.x, top: menu.at.y }}
        />
      }
      heading={
        heading === undefined ? undefined : <p className="max-w-320 text-note text-ink-2">{heading}</p>
      }
      groups={elementGroups()}
      opened={{
        open: true,
        onOpenChange: (isOpen) => {
          if (!isOpen) openMenu(undefined);
        },
        returnFocus: () => {
          if (opener.current instanceof HTMLElement || opener.current instanceof SVGElement)
            opener.current.focus();
        },
      }}
    />
  );
}

const headingOf = (design: Design, { ref, of }: OpenedMenu, selected: number): string | undefined => {
  if (ref === undefined) return undefined;
  const one = `${kindOf(design, ref)} ${nameOf(design, ref)}`;
  if (of === 'ways') return `From ${one} along`;
  return selected > 1 ? `${one} and ${selected - 1} more` : one;
};
