import { expect, it } from 'vitest';
import { findCommands } from '../../src/canvas/find-dialog.tsx';
import { readViewChoice } from '../../src/canvas/use-view-choice.ts';

const known = (id: string): boolean => ['a', 'b'].includes(id);

it('an address that says nothing of the view shows everything', () => {
  expect(readViewChoice('', '', known)).toEqual({ layers: ['cabling', 'underlay', 'overlay'] });
});

it('layers and segments stand in the address by name, in any order', () => {
  expect(readViewChoice('overlay,cabling', 'b,a', known)).toEqual({
    layers: ['cabling', 'overlay'],
    segments: ['b', 'a'],
  });
});

it('what is not known any more is passed over rather than show nothing', () => {
  expect(readViewChoice('roof', 'gone', known)).toEqual({ layers: ['cabling', 'underlay', 'overlay'] });
  expect(readViewChoice('underlay,roof', 'gone,a', known)).toEqual({ layers: ['underlay'], segments: ['a'] });
});

it('commands are found by words of their name and group in any order', () => {
  const command = (name: string, kind: string) => ({ name, kind, detail: '', run: () => undefined });
  const commands = [command('Align left edges', 'Arrange'), command('Fit the sheet', 'Sheet')];
  expect(findCommands(commands, 'edges ALIGN').map(({ name }) => name)).toEqual(['Align left edges']);
  expect(findCommands(commands, 'arrange')).toHaveLength(1);
  expect(findCommands(commands, '')).toHaveLength(2);
  expect(findCommands(commands, 'nonsense')).toEqual([]);
});
