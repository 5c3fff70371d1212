import { segmentTokens } from './segment-tokens.ts';

/** What a drawing can be seen in: two for the screen, two for paper. */
export const themes = ['paper', 'slate', 'print', 'print-colour'] as const;
export type Theme = (typeof themes)[number];

interface TokenValues {
  readonly paper: string;
  readonly slate: string;
  readonly print: string;
}
const token = (paper: string, slate: string, print: string): TokenValues => ({ paper, slate, print });

const white = '#ffffff';
const black = '#000000';

/** Every colour of the interface and the sheet by what it is for; nothing draws in any other. */
const baseTokens = {
  desk: token('#d5d9d2', '#0d1214', white),
  paper: token('#fbfaf6', '#1b2327', white),
  plate: token('#ffffff', '#263137', white),
  field: token('#ffffff', '#0f1517', white),
  panel: token('#eeefe9', '#141a1d', white),
  raise: token('#f7f7f2', '#1a2125', white),
  hover: token('#e4e6df', '#222b30', white),
  ink: token('#17232b', '#e9ece6', black),
  'ink-2': token('#414e56', '#bac3c3', '#222222'),
  'ink-3': token('#505c62', '#98a4a6', '#3c3c3c'),
  rule: token('#cdd0c8', '#2f3a3f', '#b8b8b8'),
  'rule-2': token('#a9b0aa', '#4b585d', '#8c8c8c'),
  'rule-strong': token('#6c7775', '#75848a', '#5a5a5a'),
  strip: token('#1d2a32', '#cfd5cd', black),
  'strip-ink': token('#f7f5ee', '#11181b', white),
  jacket: token('#141d23', '#080c0e', '#2b2b2b'),
  'jacket-edge': token('#0c1418', '#93a0a2', black),
  casing: token('#17232b', '#0a0f11', black),
  brass: token('#c99f4e', '#d3aa5c', white),
  'brass-deep': token('#76560f', '#e2bf78', black),
  'on-brass': token('#17232b', '#11181b', black),
  'brass-wash': token('#f4e9cf', '#3a3019', white),
  band: token('#eae9e1', '#232c2f', '#f1f1f1'),
  'band-edge': token('#69746f', '#84918f', '#3c3c3c'),
  'band-tick': token('#b4b8ae', '#46524f', '#8c8c8c'),
  blue: token('#12607b', '#7cc5de', black),
  'blue-soft': token('#9fd2e2', '#2f6f86', white),
  'blue-wash': token('#dbecf1', '#16323d', white),
  'blue-ink': token(white, '#0b1a20', white),
  red: token('#b3222a', '#ff8177', black),
  'red-ink': token(white, '#1b0a09', white),
  'red-wash': token('#f8e3df', '#402120', white),
  degr: token('#8f4b06', '#f0a75f', black),
  'degr-wash': token('#f6e7d5', '#3b2a18', white),
  advi: token('#46555d', '#b2bec2', black),
  'advi-wash': token('#e3e8e6', '#273136', white),
  ok: token('#1f6646', '#74cb9d', black),
  'ok-wash': token('#deecdf', '#19332a', white),
  lamp: token('#ffd772', '#76570f', white),
  'lamp-line': token('#8a6510', '#ffd772', black),
} as const satisfies { readonly [name: string]: TokenValues };

export type BaseToken = keyof typeof baseTokens;
export const baseTokenNames = Object.keys(baseTokens) as readonly BaseToken[];

/** Colours of the base tokens and the segments in one theme, as `#rrggbb` by token name. */
export const themeColours = (theme: Theme): Readonly<Record<string, string>> => ({
  ...Object.fromEntries(
    baseTokenNames.map((name) => [name, baseTokens[name][theme === 'print-colour' ? 'print' : theme]]),
  ),
  ...segmentTokens(theme),
});

/** The theme as CSS custom properties, `--ink` and so on. */
export const themeVariables = (theme: Theme): Readonly<Record<string, string>> =>
  Object.fromEntries(Object.entries(themeColours(theme)).map(([name, colour]) => [`--${name}`, colour]));

/** A stylesheet that puts each theme's custom properties under `[data-theme=…]`; paper also stands for the root. */
export const themeCss = (): string =>
  themes
    .map((theme) => {
      const selector = theme === 'paper' ? ':root, [data-theme="paper"]' : `[data-theme="${theme}"]`;
      const lines = Object.entries(themeVariables(theme)).map(([name, colour]) => `  ${name}: ${colour};`);
      return `${selector} {\n${lines.join('\n')}\n}\n`;
    })
    .join('\n');
