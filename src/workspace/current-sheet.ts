import { create } from 'zustand';

/** The sheet that is looked at, which the address names: what is made or moved by hand is made and moved there. */
export const useCurrentSheet = create(() => ({ number: 1 }));

export const currentSheet = (): number => useCurrentSheet.getState().number;
