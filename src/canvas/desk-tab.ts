import type { ReactNode } from 'react';
import type { Tab } from '../components/tabs.tsx';
import type { Decorations } from '../drawing/decorations.ts';
import type { ElementRef } from '../engine/model/design.ts';

/** One tab of the drawer under the sheet. */
export interface DrawerTab extends Tab {
  /** How high its contents are at first, in CSS pixels. */
  readonly usualHeightPx: number;
  readonly panel: ReactNode;
}

/** What a result in the drawer may do with the rest of the desk while its tab is open. */
export interface DeskTab extends DrawerTab {
  /** Laid over what the findings show. */
  readonly decorations?: Partial<Decorations>;
  /** Stands where the inspector stands while nothing is selected. */
  readonly side?: ReactNode;
  /** Takes the presses on the sheet's parts, which then select nothing. */
  readonly onPick?: (ref: ElementRef) => void;
}
