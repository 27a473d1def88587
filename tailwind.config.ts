import type { Config } from 'tailwindcss';
import plugin from 'tailwindcss/plugin';

/**
 * Colours of the two schemes by token name. *Paper* is the page as printed; *drum* inverts soot and bone, as
 * the smoked drum itself. Each token means a use, not a hue, so a page written for one reads in the other.
 * `frontend/tokens.test.ts` computes the contrast of every pair in use.
 */
export const schemes = {
  paper: {
    soot: '#23201d',
    ink: '#2e2a26',
    'ink-soft': '#6b6257',
    bone: '#f6f2ea',
    paper: '#fffdf9',
    rule: '#d8d0c0',
    'rule-soft': '#e8e2d6',
    edge: '#8c8272',
    band: '#23201d',
    'band-field': '#322d28',
    'band-edge': '#8b7f70',
    chalk: '#f1ebdf',
    'chalk-soft': '#cfc6b6',
    arterial: '#98302a',
    'arterial-deep': '#7c2520',
    'arterial-wash': '#f8e9e5',
    'on-arterial': '#fffdf9',
    venous: '#2c4a78',
    'venous-wash': '#e9eef6',
    straw: '#8a5a00',
    'straw-ink': '#5e3f00',
    'straw-wash': '#fbf0d9',
    moss: '#3c6048',
    'moss-wash': '#e9f1ea',
    clay: '#84755f',
  },
  drum: {
    soot: '#f6f2ea',
    ink: '#e6dfd2',
    'ink-soft': '#b5ab9b',
    bone: '#1f1c19',
    paper: '#292521',
    rule: '#4a433b',
    'rule-soft': '#3a342e',
    edge: '#938877',
    band: '#151310',
    'band-field': '#2b2622',
    'band-edge': '#8b7f70',
    chalk: '#f1ebdf',
    'chalk-soft': '#cfc6b6',
    arterial: '#ea9c91',
    'arterial-deep': '#f3b7ae',
    'arterial-wash': '#432925',
    'on-arterial': '#23201d',
    venous: '#a6c0ec',
    'venous-wash': '#26344a',
    straw: '#e2b65f',
    'straw-ink': '#f0dcae',
    'straw-wash': '#3d321a',
    moss: '#97c7a6',
    'moss-wash': '#24342a',
    clay: '#b0a18a',
  },
} as const;

export type Token = keyof (typeof schemes)['paper'];

const variables = (scheme: Record<Token, string>) =>
  Object.fromEntries(Object.entries(scheme).map(([token, value]) => [`--${token}`, value]));

const tokens = Object.keys(schemes.paper) as Token[];

/** A person's choice on the account page wins over the system's; paper is what is printed. */
const schemeRules = plugin((api) => {
  api.addBase({
    ':root': { 'color-scheme': 'light', ...variables(schemes.paper) },
    '@media screen and (prefers-color-scheme: dark)': {
      ':root:not([data-scheme="paper"])': { 'color-scheme': 'dark', ...variables(schemes.drum) },
    },
    '@media screen': {
      ':root[data-scheme="drum"]': { 'color-scheme': 'dark', ...variables(schemes.drum) },
    },
  });
});

export default {
  content: [],
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      ...Object.fromEntries(tokens.map((token) => [token, `var(--${token})`])),
    },
    fontFamily: {
      sans: ['"Noto Sans"', 'sans-serif'],
      mono: ['"Noto Sans Mono"', 'monospace'],
    },
    borderRadius: { none: '0', sm: '4px', DEFAULT: '6px', full: '9999px' },
    fontSize: {
      xs: ['0.75rem', '1.125rem'],
      sm: ['0.8125rem', '1.25rem'],
      base: ['0.9375rem', '1.375rem'],
      lg: ['1.0625rem', '1.5rem'],
      xl: ['1.375rem', '1.875rem'],
      '2xl': ['1.625rem', '2.25rem'],
      clock: ['2.125rem', '2.125rem'],
    },
    extend: { transitionDuration: { DEFAULT: '150ms' }, maxWidth: { page: '1440px', prose: '68ch' } },
  },
  plugins: [schemeRules],
} satisfies Config;
