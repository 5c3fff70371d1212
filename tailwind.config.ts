import type { Config } from 'tailwindcss';

/** A token of the theme as a colour: the value comes from `src/styles/tokens.css`. */
const token = (name: string): string => `var(--${name})`;

const colourTokens = [
  ...['desk', 'paper', 'plate', 'field', 'panel', 'raise', 'hover'],
  ...['ink', 'ink-2', 'ink-3', 'rule', 'rule-2', 'rule-strong', 'strip', 'strip-ink'],
  ...[
    'jacket',
    'jacket-edge',
    'casing',
    'brass',
    'brass-deep',
    'brass-wash',
    'band',
    'band-edge',
    'band-tick',
  ],
  ...[
    'blue',
    'blue-soft',
    'blue-wash',
    'red',
    'red-ink',
    'red-wash',
    'degr',
    'degr-wash',
    'advi',
    'advi-wash',
  ],
  ...['ok', 'ok-wash', 'lamp', 'lamp-line'],
];

export default {
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      ...Object.fromEntries(colourTokens.map((name) => [name, token(name)])),
    },
    fontFamily: { sans: ["'Work Sans'", 'system-ui', 'sans-serif'] },
    fontSize: {
      label: ['11px', '14px'],
      note: ['12px', '16px'],
      base: ['13px', '18px'],
      value: ['13.5px', { lineHeight: '18px', fontWeight: '500' }],
      section: ['15px', '20px'],
      title: ['17px', { lineHeight: '22px', fontWeight: '600' }],
      page: ['24px', '30px'],
      line: ['31px', '39px'],
    },
    borderRadius: { none: '0', control: '2px', part: '3px' },
    borderWidth: { DEFAULT: '1px', 0: '0', 1.5: '1.5px', 2: '2px', 3: '3px', 4: '4px', 5: '5px' },
    boxShadow: { sheet: 'var(--sheet-shadow)' },
  },
} satisfies Config;
