/** The parts of a keyboard event that decide which keys were pressed. */
export interface KeyPress {
  key: string;
  code: string;
  shiftKey: boolean;
  ctrlKey: boolean;
  altKey: boolean;
  metaKey: boolean;
}

function modifiersOf(press: KeyPress): string[] {
  const names: string[] = [];
  // The command key of one platform does what the control key does on the others.
  if (press.ctrlKey || press.metaKey) names.push('Control');
  if (press.altKey) names.push('Alt');
  return names;
}

/** By position, the same on every keyboard layout: `Shift+KeyF`, `Control+KeyZ`, `Space`, `ArrowLeft`. */
export function positionCombo(press: KeyPress): string {
  const modifiers = modifiersOf(press);
  if (press.shiftKey) modifiers.push('Shift');
  return [...modifiers, press.code].join('+');
}

/** By the sign that is written, wherever its key is: `sign:?`. Shift is part of the sign. */
export function signCombo(press: KeyPress): string {
  return [...modifiersOf(press), `sign:${press.key}`].join('+');
}

const SPOKEN: Readonly<Record<string, string>> = {
  Control: 'Ctrl',
  Space: 'Space',
  Escape: 'Esc',
  ArrowLeft: '\u2190',
  ArrowRight: '\u2192',
  ArrowUp: '\u2191',
  ArrowDown: '\u2193',
  Semicolon: ';',
  Comma: ',',
  Period: '.',
  Slash: '/',
  Minus: '-',
  Equal: '=',
  BracketLeft: '[',
  BracketRight: ']',
  Quote: "'",
  Backquote: '`',
};

function spokenPart(part: string): string {
  if (part.startsWith('sign:')) return part.slice('sign:'.length);
  return SPOKEN[part] ?? part.replace(/^(Key|Digit)/, '').replace(/^Numpad/, 'Num ');
}

/** A combination as it is shown on a key: `Shift F`. */
export function readableCombo(combo: string): string {
  return combo.split('+').map(spokenPart).join('\u00A0');
}

/** The same for `aria-keyshortcuts`, which joins with a plus sign. */
export function ariaCombo(combo: string): string {
  return combo.split('+').map(spokenPart).join('+');
}

/** Shift stands last among the modifiers; a sign has none, since Shift is part of it. */
export function withShift(combo: string): string {
  if (combo.includes('Shift+') || combo.includes('sign:')) return combo;
  const parts = combo.split('+');
  return [...parts.slice(0, -1), 'Shift', ...parts.slice(-1)].join('+');
}

export function isSingleKey(combo: string): boolean {
  return !combo.includes('Control+') && !combo.includes('Alt+');
}
