import { CheckBox } from '../../components/check-box.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { setListingKeys, useDesk } from '../desk-state.ts';
import { setCharacterKeys, useCharacterKeys } from './character-keys.ts';
import {
  isApple,
  isCharacterKey,
  isPossible,
  keyCaps,
  shortcutGroups,
  shortcutIds,
  shortcuts,
  type Shortcut,
} from './shortcuts.ts';

/** All keys of the sheet, as the table has them that they are run from. */
export function KeysDialog() {
  const listing = useDesk((state) => state.listingKeys);
  const editable = useOpenState((state) => state.editable);
  const charactersOn = useCharacterKeys((state) => state.on);
  if (!listing) return null;
  const apple = isApple();
  const listed = shortcutIds
    .map((id): Shortcut & { readonly id: string } => ({ id, ...shortcuts[id] }))
    .filter(
      ({ id, keys }) =>
        keys.length > 0 && isPossible(id as keyof typeof shortcuts, { editable, anySelected: true }),
    );
  return (
    <Dialog
      open
      onOpenChange={setListingKeys}
      title="Keys of the sheet"
      description="They work while nothing is being typed. What has no key here is found by its name."
      widthPx={860}
    >
      <div className="mb-12 border-b border-rule-2 pb-12">
        <CheckBox checked={charactersOn} onChange={(event) => setCharacterKeys(event.target.checked)}>
          Single letters, digits and signs are keys
        </CheckBox>
        <p className="mt-2 ml-26 text-note text-ink-2">
          Turn them off if you dictate, or press them by mistake. Those with {apple ? '⌘' : 'Ctrl'}, arrows
          and names of their own stay.
        </p>
      </div>
      <div className="gap-x-28 md:columns-2">
        {shortcutGroups.map((group) => {
          const rows = listed.filter((entry) => entry.group === group);
          return rows.length === 0 ? null : (
            <table key={group} className="mb-14 w-full break-inside-avoid text-base">
              <caption className="border-b border-ink pb-2 text-left font-semibold">{group}</caption>
              <tbody>
                {rows.map(({ id, words, keys }) => (
                  <tr key={id} className="border-b border-rule align-baseline">
                    <th scope="row" className="py-3 pr-8 text-left font-normal">
                      {words}
                    </th>
                    <td className="py-3 text-right whitespace-nowrap">
                      {keys.map((combination, i) => (
                        <span
                          key={combination}
                          className={
                            charactersOn || !isCharacterKey(combination) ? undefined : 'line-through'
                          }
                        >
                          {i > 0 && <span className="px-4 text-note text-ink-3">or</span>}
                          {keyCaps(combination, apple).map((cap) => (
                            <kbd
                              key={cap}
                              className="ml-3 inline-block min-w-20 border border-rule-strong bg-field px-5 text-center font-sans text-note leading-[18px] font-medium"
                            >
                              {cap}
                            </kbd>
                          ))}
                        </span>
                      ))}
                    </td>
                  </tr>
                ))}
              </tbody>
            </table>
          );
        })}
      </div>
    </Dialog>
  );
}
