export type Rgb = readonly [red: number, green: number, blue: number];
export type Lab = readonly [lightness: number, a: number, b: number];

/** Parses `#RRGGBB` into red, green and blue from 0 to 255. Throws RangeError for any other form. */
export function parseHex(hex: string): Rgb {
  const match = /^#([0-9a-f]{2})([0-9a-f]{2})([0-9a-f]{2})$/i.exec(hex);
  if (!match) throw new RangeError(`Not a colour of the form #RRGGBB: ${hex}`);
  return [1, 2, 3].map((group) => Number.parseInt(match[group] ?? '0', 16)) as unknown as Rgb;
}

function toLinear(channel: number): number {
  const share = channel / 255;
  return share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4;
}

function fromLinear(linear: number): number {
  const share = linear <= 0.0031308 ? linear * 12.92 : 1.055 * linear ** (1 / 2.4) - 0.055;
  return Math.round(Math.min(1, Math.max(0, share)) * 255);
}

/** Relative luminance, 0 to 1. Source: WCAG 2.2, definition of relative luminance. */
export function relativeLuminance([red, green, blue]: Rgb): number {
  return 0.2126 * toLinear(red) + 0.7152 * toLinear(green) + 0.0722 * toLinear(blue);
}

/** Contrast ratio of two colours, 1 to 21. Source: WCAG 2.2, definition of contrast ratio. */
export function contrastRatio(first: string, second: string): number {
  const luminances = [relativeLuminance(parseHex(first)), relativeLuminance(parseHex(second))];
  return (Math.max(...luminances) + 0.05) / (Math.min(...luminances) + 0.05);
}

// White point D65, 2 degree observer. Source: IEC 61966-2-1 (sRGB).
const WHITE = [0.95047, 1, 1.08883] as const;
const EPSILON = 216 / 24389;
const KAPPA = 24389 / 27;

function labCurve(value: number): number {
  return value > EPSILON ? Math.cbrt(value) : (KAPPA * value + 16) / 116;
}

function labCurveInverse(value: number): number {
  const cubed = value ** 3;
  return cubed > EPSILON ? cubed : (116 * value - 16) / KAPPA;
}

/** sRGB (0 to 255) to CIE L*a*b* under D65. Source: CIE 15:2004, 8.2.1. */
export function rgbToLab(rgb: Rgb): Lab {
  const [red, green, blue] = rgb.map(toLinear) as unknown as Rgb;
  const x = labCurve((0.4124564 * red + 0.3575761 * green + 0.1804375 * blue) / WHITE[0]);
  const y = labCurve((0.2126729 * red + 0.7151522 * green + 0.072175 * blue) / WHITE[1]);
  const z = labCurve((0.0193339 * red + 0.119192 * green + 0.9503041 * blue) / WHITE[2]);
  return [116 * y - 16, 500 * (x - y), 200 * (y - z)];
}

/** CIE L*a*b* under D65 to sRGB, clipped to 0 to 255. Source: CIE 15:2004, annex D. */
export function labToRgb([lightness, a, b]: Lab): Rgb {
  const fy = (lightness + 16) / 116;
  const x = WHITE[0] * labCurveInverse(fy + a / 500);
  const y = WHITE[1] * labCurveInverse(fy);
  const z = WHITE[2] * labCurveInverse(fy - b / 200);
  return [
    fromLinear(3.2404542 * x - 1.5371385 * y - 0.4985314 * z),
    fromLinear(-0.969266 * x + 1.8760108 * y + 0.041556 * z),
    fromLinear(0.0556434 * x - 0.2040259 * y + 1.0572252 * z),
  ];
}
