/**
 * Colours by meaning. Hues from the colour-blind-safe palette of Okabe and Ito, Color Universal Design (2008):
 * on vermillion, off blue, baseline bluish green, driven gate orange tint, spurious reddish purple.
 */
export type Role =
  | 'ink'
  | 'soft'
  | 'faint'
  | 'hair'
  | 'paper'
  | 'trace'
  | 'on'
  | 'off'
  | 'on-soft'
  | 'off-soft'
  | 'baseline'
  | 'baseline-band'
  | 'threshold'
  | 'driven'
  | 'sham'
  | 'guard'
  | 'spurious'
  | 'split'
  | 'artefact'
  | 'hover'
  | 'unsupported'

export type Palette = Readonly<Record<Role, string>>

export const LIGHT: Palette = {
  ink: '#16191d',
  soft: '#4d545c',
  faint: '#8a9098',
  hair: '#d5d6d3',
  paper: '#ffffff',
  trace: '#79828b',
  on: '#d55e00',
  off: '#0072b2',
  'on-soft': 'rgba(213,94,0,0.20)',
  'off-soft': 'rgba(0,114,178,0.20)',
  baseline: '#007a5a',
  'baseline-band': 'rgba(0,158,115,0.22)',
  threshold: '#16191d',
  driven: 'rgba(230,159,0,0.14)',
  sham: 'rgba(86,180,233,0.14)',
  guard: 'rgba(138,144,152,0.22)',
  spurious: 'rgba(204,121,167,0.42)',
  split: 'rgba(204,121,167,0.20)',
  artefact: '#a3477d',
  hover: 'rgba(240,228,66,0.55)',
  unsupported: 'rgba(138,144,152,0.45)',
}

export const DARK: Palette = {
  ink: '#e9ebec',
  soft: '#b3bac1',
  faint: '#7d868f',
  hair: '#39414a',
  paper: '#14171b',
  trace: '#9aa4ae',
  on: '#f08a4b',
  off: '#56b4e9',
  'on-soft': 'rgba(240,138,75,0.24)',
  'off-soft': 'rgba(86,180,233,0.22)',
  baseline: '#2fc79b',
  'baseline-band': 'rgba(47,199,155,0.24)',
  threshold: '#e9ebec',
  driven: 'rgba(230,159,0,0.13)',
  sham: 'rgba(86,180,233,0.13)',
  guard: 'rgba(150,160,170,0.2)',
  spurious: 'rgba(221,148,190,0.40)',
  split: 'rgba(221,148,190,0.20)',
  artefact: '#e2a2c7',
  hover: 'rgba(240,228,66,0.38)',
  unsupported: 'rgba(150,160,170,0.4)',
}

/** Sans serif stack; the first ones have tabular figures. */
export const FONT_STACK = '"Helvetica Neue", Helvetica, Arial, "Liberation Sans", sans-serif'
