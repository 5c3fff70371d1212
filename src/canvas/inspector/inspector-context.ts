import { createContext, use } from 'react';
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
  /** Sections that a person opened or closed; they stay so from one element to the next. */
  readonly sections: Map<string, boolean>;
}

export const InspectorContext = createContext<InspectorTools>({ sections: new Map() });
export const useInspectorTools = (): InspectorTools => use(InspectorContext);
