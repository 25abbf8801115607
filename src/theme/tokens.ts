import { theme as library } from 'ant-design-vue';
import type { ThemeConfig } from 'ant-design-vue/es/config-provider/context';
import { palettes } from '@/theme/palette.ts';
import type { Palette, ThemeName } from '@/theme/palette.ts';

export const fontText = "'Schibsted Grotesk Variable', 'Helvetica Neue', Arial, sans-serif";
export const fontFigures = "'JetBrains Mono Variable', ui-monospace, 'DejaVu Sans Mono', monospace";

function toPropertyName(key: string): string {
  return `--${key.replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`)}`;
}

function toDeclarations(palette: Palette): string {
  return Object.entries(palette)
    .map(([key, value]) => `${toPropertyName(key)}:${value}`)
    .join(';');
}

/** The style sheet with the colours of both themes as custom properties; paper on a printer is always light. */
export function themeStyleSheet(): string {
  const light = toDeclarations(palettes.light);
  const dark = toDeclarations(palettes.dark);
  return [
    `:root{--font-text:${fontText};--font-figures:${fontFigures}}`,
    `:root,:root[data-theme="light"]{color-scheme:light;${light}}`,
    `:root[data-theme="dark"]{color-scheme:dark;${dark}}`,
    `@media print{:root,:root[data-theme="dark"]{color-scheme:light;${light}}}`,
  ].join('\n');
}

export function installThemeStyleSheet(page: Document = document): void {
  const style = page.createElement('style');
  style.textContent = themeStyleSheet();
  page.head.append(style);
}

/**
 * The same colours as tokens of the component library. They are put over what its algorithm derives, since the
 * algorithm for dark themes would mix other colours from ours.
 */
export function libraryTheme(name: ThemeName): ThemeConfig {
  const base = name === 'dark' ? library.darkAlgorithm : library.defaultAlgorithm;
  const colours = colourTokens(palettes[name]);
  return {
    algorithm: (seed, map) => ({ ...base(seed, map), ...colours }),
    token: { ...shapeTokens, ...colours },
  };
}

const shapeTokens = {
  fontFamily: fontText,
  fontFamilyCode: fontFigures,
  fontSize: 15,
  lineHeight: 1.55,
  borderRadius: 2,
  borderRadiusLG: 2,
  borderRadiusSM: 2,
  borderRadiusXS: 1,
  controlHeight: 38,
  controlHeightSM: 30,
  controlHeightLG: 46,
  lineWidthBold: 2,
  controlOutlineWidth: 2,
  boxShadow: 'none',
  boxShadowSecondary: 'none',
  boxShadowTertiary: 'none',
  motionDurationSlow: '0.16s',
  motionDurationMid: '0.12s',
  motionDurationFast: '0.08s',
  opacityLoading: 1,
  wireframe: false,
};

function colourTokens(palette: Palette) {
  return {
    colorPrimary: palette.melt,
    colorPrimaryHover: palette.meltStrong,
    colorPrimaryActive: palette.meltStrong,
    colorPrimaryBorder: palette.ink,
    colorInfo: palette.melt,
    colorSuccess: palette.melt,
    colorWarning: palette.glow,
    colorError: palette.glow,
    colorErrorHover: palette.glow,
    colorErrorBorderHover: palette.glow,
    colorLink: palette.melt,
    colorLinkHover: palette.meltStrong,
    colorTextBase: palette.ink,
    colorText: palette.ink,
    colorTextHeading: palette.ink,
    colorTextSecondary: palette.inkQuiet,
    colorTextTertiary: palette.inkQuiet,
    colorTextQuaternary: palette.inkQuiet,
    colorTextDescription: palette.inkQuiet,
    colorTextPlaceholder: palette.inkQuiet,
    colorTextDisabled: palette.inkQuiet,
    colorTextLightSolid: palette.onMelt,
    colorIcon: palette.inkQuiet,
    colorBgBase: palette.paper,
    colorBgLayout: palette.paper,
    colorBgContainer: palette.sheet,
    colorBgElevated: palette.sheet,
    colorBgContainerDisabled: palette.tint,
    colorFillContent: palette.tint,
    colorFillSecondary: palette.hairline,
    colorBorder: palette.edge,
    colorBorderSecondary: palette.hairline,
    colorSplit: palette.hairline,
    // The ring of base.css is the only one; these would draw shadows under buttons.
    controlOutline: 'transparent',
    controlTmpOutline: 'transparent',
    colorErrorOutline: 'transparent',
    controlItemBgHover: palette.tint,
    controlItemBgActive: palette.meltTint,
  };
}
