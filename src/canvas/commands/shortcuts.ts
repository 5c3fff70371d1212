/** One command, or something that is done with a key held: what it is called and which keys do it. */
export interface Shortcut {
  readonly words: string;
  readonly group: ShortcutGroup;
  /**
   * Each does it: a key's name as browsers have it, after `Mod+` (Ctrl, on Apple keyboards ⌘), `Shift+` or `Alt+`. None:
   * by name only, from the search.
   */
  readonly keys: readonly string[];
  /** Where it makes sense; everywhere when absent. */
  readonly needs?: readonly ShortcutNeed[];
  /** Done by hand and key together, or by the browser; listed, never run from the table. */
  readonly by?: 'hand' | 'clipboard';
}
export const shortcutGroups = ['Find', 'Sheet', 'Layers', 'Select', 'Change', 'Place', 'Arrange'] as const;
export type ShortcutGroup = (typeof shortcutGroups)[number];
export type ShortcutNeed = 'edit' | 'selection';

const edit = ['edit'] as const;
const editSelected = ['edit', 'selection'] as const;
const selected = ['selection'] as const;

/** All commands of the sheet. Keys, search and the list of keys come from here and from nowhere else. */
export const shortcuts = {
  find: { words: 'Find an element or a command', group: 'Find', keys: ['Mod+K', '/'] },
  keys: { words: 'Show all keys', group: 'Find', keys: ['?'] },
  menu: {
    words: 'Open the menu of what is selected',
    group: 'Find',
    keys: ['Shift+F10', 'ContextMenu'],
  },

  select: { words: 'Select and move', group: 'Sheet', keys: ['V'] },
  pan: { words: 'Move the sheet', group: 'Sheet', keys: ['H'] },
  panHeld: { words: 'Move the sheet while it is held', group: 'Sheet', keys: ['Space'], by: 'hand' },
  fit: { words: 'Fit the sheet', group: 'Sheet', keys: ['0'] },
  zoomIn: { words: 'Zoom in', group: 'Sheet', keys: ['+', '='] },
  zoomOut: { words: 'Zoom out', group: 'Sheet', keys: ['-'] },
  zoomSelection: { words: 'Zoom to what is selected', group: 'Sheet', keys: ['.'], needs: selected },
  previousSheet: { words: 'Previous sheet', group: 'Sheet', keys: ['Alt+PageUp'] },
  nextSheet: { words: 'Next sheet', group: 'Sheet', keys: ['Alt+PageDown'] },
  inspector: { words: 'Show the inspector, or put it away', group: 'Sheet', keys: ['I'] },

  layerCabling: { words: 'Cabling on or off', group: 'Layers', keys: ['1'] },
  layerUnderlay: { words: 'Underlay on or off', group: 'Layers', keys: ['2'] },
  layerOverlay: { words: 'Overlay on or off', group: 'Layers', keys: ['3'] },
  onlySegment: { words: 'Only the segments of what is selected', group: 'Layers', keys: ['S'] },
  everything: { words: 'Everything again', group: 'Layers', keys: ['A'] },

  selectAll: { words: 'Select all', group: 'Select', keys: ['Mod+A'] },
  letGo: { words: 'Let go of what is held or selected', group: 'Select', keys: ['Escape'] },
  extend: { words: 'Add to what is selected', group: 'Select', keys: ['Shift+Click'], by: 'hand' },
  farEnd: { words: 'Follow the cord or cable to its far end', group: 'Select', keys: ['F'], needs: selected },

  undo: { words: 'Undo', group: 'Change', keys: ['Mod+Z'], needs: edit },
  redo: { words: 'Do again', group: 'Change', keys: ['Mod+Shift+Z', 'Mod+Y'], needs: edit },
  copy: { words: 'Copy', group: 'Change', keys: ['Mod+C'], needs: selected, by: 'clipboard' },
  cut: { words: 'Cut', group: 'Change', keys: ['Mod+X'], needs: editSelected, by: 'clipboard' },
  paste: { words: 'Paste', group: 'Change', keys: ['Mod+V'], needs: edit, by: 'clipboard' },
  duplicate: { words: 'Duplicate', group: 'Change', keys: ['Mod+D'], needs: editSelected },
  rename: { words: 'Rename', group: 'Change', keys: ['F2'], needs: editSelected },
  remove: { words: 'Remove', group: 'Change', keys: ['Delete', 'Backspace'], needs: editSelected },

  note: { words: 'Put a note down', group: 'Place', keys: ['N'], needs: edit },
  noteHere: {
    words: 'Pin a note to what is selected',
    group: 'Place',
    keys: ['Shift+N'],
    needs: editSelected,
  },
  firewall: { words: 'Put a firewall down', group: 'Place', keys: [], needs: edit },
  haPair: { words: 'Put an HA pair down', group: 'Place', keys: [], needs: edit },
  router: { words: 'Put a router down', group: 'Place', keys: [], needs: edit },
  switch: { words: 'Put a switch down', group: 'Place', keys: [], needs: edit },
  host: { words: 'Put a host down', group: 'Place', keys: [], needs: edit },
  site: { words: 'Put a site down', group: 'Place', keys: [], needs: edit },
  transport: { words: 'Put a transport down', group: 'Place', keys: [], needs: edit },
  cable: { words: 'Pull a cable…', group: 'Place', keys: [], needs: edit },
  tunnel: { words: 'Pull a tunnel…', group: 'Place', keys: [], needs: edit },
  association: { words: 'Make an IPsec association…', group: 'Place', keys: [], needs: edit },

  nudgeLeft: { words: 'Move left a little', group: 'Arrange', keys: ['ArrowLeft'], needs: editSelected },
  nudgeRight: { words: 'Move right a little', group: 'Arrange', keys: ['ArrowRight'], needs: editSelected },
  nudgeUp: { words: 'Move up a little', group: 'Arrange', keys: ['ArrowUp'], needs: editSelected },
  nudgeDown: { words: 'Move down a little', group: 'Arrange', keys: ['ArrowDown'], needs: editSelected },
  pushLeft: { words: 'Move left', group: 'Arrange', keys: ['Shift+ArrowLeft'], needs: editSelected },
  pushRight: { words: 'Move right', group: 'Arrange', keys: ['Shift+ArrowRight'], needs: editSelected },
  pushUp: { words: 'Move up', group: 'Arrange', keys: ['Shift+ArrowUp'], needs: editSelected },
  pushDown: { words: 'Move down', group: 'Arrange', keys: ['Shift+ArrowDown'], needs: editSelected },
  unsnapped: {
    words: 'Drag without snapping while it is held',
    group: 'Arrange',
    keys: ['Alt'],
    needs: edit,
    by: 'hand',
  },
  alignLeft: { words: 'Align left edges', group: 'Arrange', keys: ['Shift+L'], needs: editSelected },
  alignCentre: {
    words: 'Align centres in a column',
    group: 'Arrange',
    keys: ['Shift+C'],
    needs: editSelected,
  },
  alignRight: { words: 'Align right edges', group: 'Arrange', keys: ['Shift+R'], needs: editSelected },
  alignTop: { words: 'Align top edges', group: 'Arrange', keys: ['Shift+T'], needs: editSelected },
  alignMiddle: { words: 'Align centres in a row', group: 'Arrange', keys: ['Shift+M'], needs: editSelected },
  alignBottom: { words: 'Align bottom edges', group: 'Arrange', keys: ['Shift+B'], needs: editSelected },
  spaceAcross: { words: 'Space out evenly across', group: 'Arrange', keys: ['Shift+H'], needs: editSelected },
  spaceDown: { words: 'Space out evenly down', group: 'Arrange', keys: ['Shift+V'], needs: editSelected },
  lock: { words: 'Lock the place, or free it', group: 'Arrange', keys: ['L'], needs: editSelected },
  collapse: { words: 'Collapse the site, or open it', group: 'Arrange', keys: ['C'], needs: editSelected },
  tidy: { words: 'Tidy the whole sheet', group: 'Arrange', keys: [], needs: edit },
  tidySelected: {
    words: 'Tidy the selected site or devices',
    group: 'Arrange',
    keys: ['T'],
    needs: editSelected,
  },
} as const satisfies { readonly [id: string]: Shortcut };

export type ShortcutId = keyof typeof shortcuts;
/** Those that the table runs. */
export type CommandId = {
  [Id in ShortcutId]: (typeof shortcuts)[Id] extends { readonly by: string } ? never : Id;
}[ShortcutId];

export const shortcutIds = Object.keys(shortcuts) as readonly ShortcutId[];
const shortcutOf = (id: ShortcutId): Shortcut => shortcuts[id];
export const isCommand = (id: ShortcutId): id is CommandId => shortcutOf(id).by === undefined;

export interface Pressed {
  readonly key: string;
  readonly ctrlKey: boolean;
  readonly metaKey: boolean;
  readonly shiftKey: boolean;
  readonly altKey: boolean;
}

const partsOf = (keys: string): { readonly key: string; readonly mods: ReadonlySet<string> } => {
  const mods = new Set<string>();
  let key = keys;
  for (
    let match = /^(Mod|Shift|Alt)\+(?=.)/.exec(key);
    match !== null;
    match = /^(Mod|Shift|Alt)\+(?=.)/.exec(key)
  ) {
    mods.add(match[1]!);
    key = key.slice(match[0].length);
  }
  return { key, mods };
};

/** Signs such as '?' and '+' need Shift on some keyboards and not on others: there it doesn't count. */
const isSign = (key: string): boolean => key.length === 1 && !/[a-z0-9]/i.test(key);

const isPressed = (keys: string, pressed: Pressed): boolean => {
  const { key, mods } = partsOf(keys);
  return (
    key.toLowerCase() === pressed.key.toLowerCase() &&
    mods.has('Mod') === (pressed.ctrlKey || pressed.metaKey) &&
    mods.has('Alt') === pressed.altKey &&
    (isSign(key) || mods.has('Shift') === pressed.shiftKey)
  );
};

// WCAG 2.2, 2.1.4 Character Key Shortcuts: those of one letter, digit or sign alone can be turned off.
/** A key that types something when it is pressed alone or with Shift. */
export const isCharacterKey = (keys: string): boolean => {
  const { key, mods } = partsOf(keys);
  return key.length === 1 && !mods.has('Mod') && !mods.has('Alt');
};

/** The command that a press of keys asks for; those of a single character only if `characterKeys`. */
export const commandFor = (pressed: Pressed, characterKeys = true): CommandId | undefined =>
  shortcutIds.find(
    (id): id is CommandId =>
      isCommand(id) &&
      shortcutOf(id).keys.some(
        (keys) => (characterKeys || !isCharacterKey(keys)) && isPressed(keys, pressed),
      ),
  );

/** Whether a command makes sense for who may edit or only read, with something selected or nothing. */
export const isPossible = (
  id: ShortcutId,
  at: { readonly editable: boolean; readonly anySelected: boolean },
): boolean => {
  const { needs = [] } = shortcutOf(id);
  return (at.editable || !needs.includes('edit')) && (at.anySelected || !needs.includes('selection'));
};

const shown: { readonly [key: string]: string } = {
  ArrowLeft: '←',
  ArrowRight: '→',
  ArrowUp: '↑',
  ArrowDown: '↓',
  Escape: 'Esc',
  Delete: 'Del',
  ContextMenu: 'Menu',
  PageUp: 'Page up',
  PageDown: 'Page down',
  '-': '−',
};

/** The keys as they stand on a keyboard, one word for each: 'Ctrl', 'K'. */
export const keyCaps = (keys: string, apple = false): readonly string[] => {
  const { key, mods } = partsOf(keys);
  return [
    ...(mods.has('Mod') ? [apple ? '⌘' : 'Ctrl'] : []),
    ...(mods.has('Alt') ? [apple ? 'Option' : 'Alt'] : []),
    ...(mods.has('Shift') ? ['Shift'] : []),
    shown[key] ?? key,
  ];
};

/** The first keys of a command in a few letters, for menus and hints; empty where it has none. */
export const keyWords = (id: ShortcutId, apple = isApple()): string => {
  const [first] = shortcutOf(id).keys;
  return first === undefined ? '' : keyCaps(first, apple).join(' ');
};

/** Whether this keyboard has ⌘ for Ctrl. */
export const isApple = (): boolean =>
  typeof navigator !== 'undefined' && /Mac|iPhone|iPad/.test(navigator.userAgent);
