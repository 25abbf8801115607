import type { GrowthPhaseKind } from '@shared/contract/phases.ts';

/** The colours of one theme. Every pair that carries text is listed in TEXT_PAIRS and meets WCAG 2.2 AA. */
export interface Palette {
  /** Ground of every page. */
  paper: string;
  /** Ground of fields and raised rows, one step from paper. */
  sheet: string;
  /** Quiet ground: selected rows, the sensor's band, code. */
  tint: string;
  ink: string;
  /** Secondary text. */
  inkQuiet: string;
  /** Lines that only separate. */
  hairline: string;
  /** Edges of controls, 3:1 against paper. */
  edge: string;
  /** Primary: what can be pressed, what is in hand. */
  melt: string;
  meltStrong: string;
  meltTint: string;
  onMelt: string;
  /** Attention as text. */
  glow: string;
  /** Attention as a fill or a line. */
  glowFill: string;
  glowTint: string;
  onGlow: string;
  /** Events, and nothing else. */
  fracture: string;
  fractureTint: string;
  onFracture: string;
}

export type ThemeName = 'light' | 'dark';

export const palettes: Readonly<Record<ThemeName, Palette>> = {
  light: {
    paper: '#F4F7F8',
    sheet: '#FBFCFD',
    tint: '#E7EFF1',
    ink: '#10202A',
    inkQuiet: '#4C5D67',
    hairline: '#D2DBDF',
    edge: '#7A8992',
    melt: '#0B6B75',
    meltStrong: '#08535B',
    meltTint: '#DCEBED',
    onMelt: '#F4F7F8',
    glow: '#9A5200',
    glowFill: '#E08A1E',
    glowTint: '#FBEFDF',
    onGlow: '#10202A',
    fracture: '#B0124F',
    fractureTint: '#F6E1E9',
    onFracture: '#FFFFFF',
  },
  dark: {
    paper: '#0E171D',
    sheet: '#132028',
    tint: '#182730',
    ink: '#E4EDF0',
    inkQuiet: '#9DAEB7',
    hairline: '#25353F',
    edge: '#667A86',
    melt: '#4FB7BF',
    meltStrong: '#7BD0D6',
    meltTint: '#143239',
    onMelt: '#0E171D',
    glow: '#F2A33A',
    glowFill: '#F2A33A',
    glowTint: '#2B2318',
    onGlow: '#0E171D',
    fracture: '#FF6F9C',
    fractureTint: '#331A27',
    onFracture: '#0E171D',
  },
};

type PairName = readonly [text: keyof Palette, ground: keyof Palette];

/** Text on ground, as the screens use them. */
export const TEXT_PAIRS: readonly PairName[] = [
  ['ink', 'paper'],
  ['ink', 'sheet'],
  ['ink', 'tint'],
  ['ink', 'meltTint'],
  ['ink', 'glowTint'],
  ['ink', 'fractureTint'],
  ['inkQuiet', 'paper'],
  ['inkQuiet', 'sheet'],
  ['inkQuiet', 'tint'],
  ['inkQuiet', 'meltTint'],
  ['inkQuiet', 'glowTint'],
  ['melt', 'paper'],
  ['melt', 'sheet'],
  ['melt', 'tint'],
  ['melt', 'meltTint'],
  ['meltStrong', 'paper'],
  ['meltStrong', 'tint'],
  ['onMelt', 'melt'],
  ['onMelt', 'meltStrong'],
  ['glow', 'paper'],
  ['glow', 'sheet'],
  ['glow', 'tint'],
  ['glow', 'glowTint'],
  ['onGlow', 'glowFill'],
  ['fracture', 'paper'],
  ['fracture', 'sheet'],
  ['fracture', 'tint'],
  ['fracture', 'fractureTint'],
  ['onFracture', 'fracture'],
];

/** Edges of controls and the focus ring, which need 3:1 (WCAG 2.2, 1.4.11). */
export const GRAPHIC_PAIRS: readonly PairName[] = [
  ['edge', 'paper'],
  ['edge', 'sheet'],
  ['melt', 'paper'],
  ['ink', 'paper'],
  ['fracture', 'paper'],
];

/** Growth phases of a run: fill of the ribbon and the text upon it, the same in both themes. */
export const phaseColours: Readonly<Record<GrowthPhaseKind, { fill: string; text: string }>> = {
  'supercooled-liquid': { fill: '#86B7CC', text: '#10202A' },
  nucleation: { fill: '#F4C98B', text: '#10202A' },
  recalescence: { fill: '#E08A1E', text: '#10202A' },
  'dendritic-growth': { fill: '#B0124F', text: '#FFFFFF' },
  'cellular-growth': { fill: '#8C4A86', text: '#FFFFFF' },
  'planar-growth': { fill: '#2C7A71', text: '#FFFFFF' },
  'eutectic-growth': { fill: '#4A5FA5', text: '#FFFFFF' },
  coarsening: { fill: '#B9A98C', text: '#10202A' },
  'solid-cooling': { fill: '#95A3AB', text: '#10202A' },
  'not-visible': { fill: '#D2DBDF', text: '#10202A' },
};
