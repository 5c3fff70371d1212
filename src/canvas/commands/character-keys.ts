import { create } from 'zustand';

const storageKey = 'longpatch.character-keys';

const stored = (): boolean => {
  try {
    return localStorage.getItem(storageKey) !== 'off';
  } catch {
    return true;
  }
};

// WCAG 2.2, 2.1.4 Character Key Shortcuts: somebody who dictates or whose hand slips can turn them off.
/** Whether single letters, digits and signs are commands, on this screen. */
export const useCharacterKeys = create<{ readonly on: boolean }>(() => ({ on: stored() }));

export const areCharacterKeysOn = (): boolean => useCharacterKeys.getState().on;
export const setCharacterKeys = (on: boolean): void => {
  useCharacterKeys.setState({ on });
  try {
    if (on) localStorage.removeItem(storageKey);
    else localStorage.setItem(storageKey, 'off');
  } catch {
    // Without storage it holds until the page is left.
  }
};
