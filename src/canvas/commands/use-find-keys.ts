import { useEffect } from 'react';
import { takesKeys } from '../../lib/takes-keys.ts';
import { setListingKeys, setSearching } from '../desk-state.ts';
import { areCharacterKeysOn } from './character-keys.ts';
import { commandFor } from './shortcuts.ts';

/** The search and the list of keys, by key on every page of a design while nobody types. */
export function useFindKeys(): void {
  useEffect(() => {
    const onKeyDown = (event: KeyboardEvent): void => {
      if (takesKeys(event.target) || event.defaultPrevented) return;
      const command = commandFor(event, areCharacterKeysOn());
      if (command !== 'find' && command !== 'keys') return;
      event.preventDefault();
      if (command === 'find') setSearching(true);
      else setListingKeys(true);
    };
    document.addEventListener('keydown', onKeyDown);
    return () => document.removeEventListener('keydown', onKeyDown);
  }, []);
}
