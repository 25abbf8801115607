interface ProgressLine {
  show: (fraction: number) => void;
  clear: () => void;
}

const CLEAR_LINE = '\r\u001b[K';

/** One line on a terminal that says how far it is; nothing where the output goes elsewhere. */
export function progressLine(terminal: NodeJS.WriteStream, name: string): ProgressLine {
  if (!terminal.isTTY) return { show: () => undefined, clear: () => undefined };
  let shownPercent = -1;
  return {
    show(fraction) {
      const percent = Math.floor(fraction * 100);
      if (percent === shownPercent) return;
      shownPercent = percent;
      terminal.write(`${CLEAR_LINE}Measuring ${name}: ${percent} %`);
    },
    clear() {
      if (shownPercent >= 0) terminal.write(CLEAR_LINE);
      shownPercent = -1;
    },
  };
}
