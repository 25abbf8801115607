/** Names are data, never paths: only the last part is kept, without characters that no file name shows. */
export function plainFileName(name: string, nameless = 'recording.wav'): string {
  const last = name.split(/[\\/]/).at(-1) ?? '';
  const shown = last.replace(/[\p{Cc}\p{Cf}\p{Co}\p{Cs}\u2028\u2029]/gu, '').trim();
  return shown === '' || /^\.+$/.test(shown) ? nameless : shown.slice(0, 255);
}
