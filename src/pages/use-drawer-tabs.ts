import type { DeskTab } from '../canvas/desk-tab.ts';
import { useSearchValues } from '../lib/use-search-values.ts';

/** Which tab of the drawer the address opens, the first where it says nothing, and the ways to the others. */
export function useDrawerTabs(tabs: readonly [DeskTab, ...DeskTab[]]) {
  const { valueOf, change } = useSearchValues();
  const [first] = tabs;
  const openTab = (tab: string): void => change({ drawer: tab === first.value ? '' : tab });
  return {
    active: tabs.find((tab) => tab.value === valueOf('drawer')) ?? first,
    openTab,
    /** For the command search. */
    openings: tabs.map(({ value, label }) => ({
      name: `Open ${label.toLowerCase()}`,
      kind: 'Drawer',
      detail: '',
      run: () => openTab(value),
    })),
  };
}
