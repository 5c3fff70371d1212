import { describe, expect, it } from 'vitest';
import {
  commandFor,
  isCharacterKey,
  isCommand,
  isPossible,
  keyCaps,
  keyWords,
  shortcutIds,
  shortcuts,
  type Pressed,
  type Shortcut,
} from '../../../src/canvas/commands/shortcuts.ts';

const press = (key: string, held: Partial<Pressed> = {}): Pressed => ({
  key,
  ctrlKey: false,
  metaKey: false,
  shiftKey: false,
  altKey: false,
  ...held,
});
/** The press that a combination of the table describes. */
const pressOf = (keys: string): Pressed => {
  const parts = keys.split('+').filter(Boolean);
  const key = keys.endsWith('+') ? '+' : parts.at(-1)!;
  const mods = new Set(parts.slice(0, -1));
  return press(key, { ctrlKey: mods.has('Mod'), shiftKey: mods.has('Shift'), altKey: mods.has('Alt') });
};
const entries = shortcutIds.map((id): readonly [typeof id, Shortcut] => [id, shortcuts[id]]);

describe('the table of keys', () => {
  it('has no two commands on one key', () => {
    const taken = entries.flatMap(([id, { keys }]) => keys.map((key) => [key, id] as const));
    const twice = taken.filter(([key, id]) => taken.some(([other, at]) => other === key && at !== id));
    expect(twice).toEqual([]);
  });

  it('runs every command from each of its keys', () => {
    for (const [id, { keys }] of entries)
      if (isCommand(id)) for (const key of keys) expect(commandFor(pressOf(key)), key).toBe(id);
  });

  it('calls no two commands the same', () => {
    const words = entries.map(([, entry]) => entry.words);
    expect(new Set(words).size).toBe(words.length);
  });

  it('runs nothing for what is done by hand or by the browser', () => {
    for (const keys of ['Mod+C', 'Mod+X', 'Mod+V', 'Space', 'Alt'])
      expect(commandFor(pressOf(keys)), keys).toBeUndefined();
  });
});

describe('a press of keys', () => {
  it('takes ⌘ for Ctrl, and a sign with or without Shift', () => {
    expect(commandFor(press('k', { metaKey: true }))).toBe('find');
    expect(commandFor(press('?', { shiftKey: true }))).toBe('keys');
    expect(commandFor(press('?'))).toBe('keys');
    expect(commandFor(press('Z', { ctrlKey: true, shiftKey: true }))).toBe('redo');
  });

  it('tells a letter from the same with Shift, Ctrl or Alt', () => {
    expect(commandFor(press('v'))).toBe('select');
    expect(commandFor(press('V', { shiftKey: true }))).toBe('spaceDown');
    expect(commandFor(press('v', { altKey: true }))).toBeUndefined();
    expect(commandFor(press('a'))).toBe('everything');
    expect(commandFor(press('a', { ctrlKey: true }))).toBe('selectAll');
  });

  it('of a single character does nothing once those are turned off', () => {
    for (const key of ['v', '1', '/', '?', '+']) expect(commandFor(press(key), false), key).toBeUndefined();
    expect(commandFor(press('L', { shiftKey: true }), false)).toBeUndefined();
    expect(commandFor(press('k', { ctrlKey: true }), false)).toBe('find');
    expect(commandFor(press('ArrowLeft'), false)).toBe('nudgeLeft');
    expect(isCharacterKey('F2')).toBe(false);
  });
});

it('who may only read has no command that changes the design, and needs something selected for those on it', () => {
  const possible = (editable: boolean, anySelected: boolean) =>
    shortcutIds.filter((id) => isPossible(id, { editable, anySelected }));
  expect(possible(false, true)).not.toContain('remove');
  expect(possible(false, true)).toEqual(expect.arrayContaining(['farEnd', 'copy', 'fit']));
  expect(possible(true, false)).not.toContain('alignLeft');
  expect(possible(true, true)).toEqual(shortcutIds);
});

it('keys are written as they stand on the keyboard', () => {
  expect(keyCaps('Mod+Shift+Z')).toEqual(['Ctrl', 'Shift', 'Z']);
  expect(keyCaps('Mod+K', true)).toEqual(['⌘', 'K']);
  expect(keyCaps('Shift+ArrowLeft')).toEqual(['Shift', '←']);
  expect(keyWords('remove')).toBe('Del');
  expect(keyWords('firewall')).toBe('');
});
