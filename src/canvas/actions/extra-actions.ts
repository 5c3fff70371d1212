import { createContext, use } from 'react';
import type { MenuAction } from '../../components/menu.tsx';
import type { ElementRef } from '../../engine/model/design.ts';

/** What a page's features can do with an element, such as tracing from it; nothing for those they have no use for. */
export type ExtraActions = (ref: ElementRef) => readonly MenuAction[];

const none: ExtraActions = () => [];
const ExtraActionsContext = createContext<ExtraActions>(none);

/** Stands round canvas and outline; their menus then hold these actions as well. */
export const ExtraActionsProvider = ExtraActionsContext.Provider;
export const useExtraActions = (): ExtraActions => use(ExtraActionsContext);
