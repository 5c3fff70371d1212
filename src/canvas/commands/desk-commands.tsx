import { useEffect, useMemo } from 'react';
import { anchorOf } from '../../drawing/routing/anchors.ts';
import { useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { offerCommands } from '../desk-state.ts';
import { useDrawn } from '../geometry-context.tsx';
import type { NamedCommand } from '../named-command.ts';
import { SheetMenu } from '../sheet-menu.tsx';
import { useView } from '../use-view.ts';
import { isCommand, isPossible, keyWords, shortcutIds, shortcuts } from './shortcuts.ts';
import { useCommands } from './use-commands.ts';
import { useShortcuts } from './use-shortcuts.ts';

/** All ways to a command of the sheet: its keys, its menus, and their names for the search. */
export function DeskCommands({ more }: { readonly more: readonly NamedCommand[] }) {
  const open = useOpenDesign();
  const editable = useOpenState((state) => state.editable);
  const anySelected = useOpenState((state) => state.selection.length > 0);
  const { geometry } = useDrawn();
  const view = useView();
  const commands = useCommands();
  useShortcuts(commands);
  const named = useMemo(
    (): readonly NamedCommand[] => [
      ...shortcutIds
        .filter(isCommand)
        .filter((id) => id !== 'find' && id !== 'menu' && isPossible(id, { editable, anySelected }))
        .map((id) => ({
          name: shortcuts[id].words,
          kind: shortcuts[id].group,
          detail: keyWords(id),
          run: commands.run[id],
        })),
      ...more,
    ],
    [commands, more, editable, anySelected],
  );
  useEffect(() => {
    offerCommands({
      commands: named,
      goTo: (ref) => {
        open.select([ref]);
        const anchor = anchorOf(geometry, ref, open.store.getState().document);
        if (anchor !== undefined) view.showPoint(anchor);
      },
    });
    return () => offerCommands(undefined);
  }, [named, open, geometry, view]);
  return <SheetMenu commands={commands} />;
}
