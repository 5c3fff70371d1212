import { FindDialog, type NamedCommand } from '../find-dialog.tsx';
import { SheetMenu } from '../sheet-menu.tsx';
import { KeysDialog } from './keys-dialog.tsx';
import { useCommands } from './use-commands.ts';
import { useShortcuts } from './use-shortcuts.ts';

/** All ways to a command: keys, search, the list of keys and the menus on the sheet. */
export function DeskCommands({ more }: { readonly more: readonly NamedCommand[] }) {
  const commands = useCommands();
  useShortcuts(commands);
  return (
    <>
      <FindDialog commands={commands} more={more} />
      <KeysDialog />
      <SheetMenu commands={commands} />
    </>
  );
}
