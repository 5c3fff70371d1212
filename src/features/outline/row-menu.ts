import type { ElementActions, Subject } from '../../canvas/actions/element-actions.ts';
import { elementMenu, type MenuFacts } from '../../canvas/actions/element-menu.ts';
import type { MenuGroup } from '../../components/menu.tsx';
import type { OutlineGroup, OutlineRow } from './outline-row.ts';

/** What the button at a group's head says; absent where nothing is added by one press. */
export const groupAddWords: { readonly [G in OutlineGroup]?: string } = {
  sites: 'Add a site',
  transports: 'Add a transport',
  associations: 'Associate…',
  segments: 'Add a segment',
  notes: 'Add a note',
};

/** What a row is about; undefined for the heads of groups. */
export const subjectOf = ({ ref, member, detach }: OutlineRow): Subject | undefined =>
  ref === undefined ? undefined : { ref, member, detach };

/** Ports, links and demands may go without a name. */
export const mayBeNameless = ({ ref }: OutlineRow): boolean =>
  ref?.port !== undefined || ref?.collection === 'links' || ref?.collection === 'demands';

/** What can be done with a row: the same as with its element on the sheet. */
export const rowMenu = (row: OutlineRow, facts: MenuFacts, act: ElementActions): readonly MenuGroup[] => {
  const subject = subjectOf(row);
  return subject === undefined ? [] : elementMenu(subject, facts, act);
};
