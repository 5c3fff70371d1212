import { createContext, use, type ReactNode } from 'react';
import type { MenuGroup } from '../../components/menu.tsx';
import type { ElementRef } from '../../engine/model/design.ts';
import type { Standing } from '../../workspace/operations/move-parts.ts';

/** What somebody asks to have joined to an element. */
export interface ConnectRequest {
  readonly kind: 'cable' | 'landing' | 'tunnel' | 'association';
  readonly from: ElementRef;
}

/** What the screen around the inspector can do for it. */
export interface InspectorTools {
  readonly onConnect?: (request: ConnectRequest) => void;
  readonly onShowFinding?: (key: string) => void;
  /** Where things stand as drawn; without it only what a person placed can be locked. */
  readonly standing?: Standing;
  /** What can be done with an element where there is a sheet to do it on. */
  readonly menuOf?: (ref: ElementRef) => readonly MenuGroup[];
  /** Stands under the fields of an element, such as what was said about it. */
  readonly footOf?: (ref: ElementRef) => ReactNode;
  /** Sections that a person opened or closed; they stay so from one element to the next. */
  readonly sections: Map<string, boolean>;
}

export const InspectorContext = createContext<InspectorTools>({ sections: new Map() });
export const useInspectorTools = (): InspectorTools => use(InspectorContext);
