/** After a press of the pointer, letters and the space bar belong to the bench again, not to the control. */
export function createKeyReturn() {
  let isByPointer = false;

  function giveBack(event: Event): void {
    const control = event.target instanceof Element ? event.target.closest('button, input, select') : null;
    const isOpening = event.type === 'click' && control instanceof HTMLSelectElement;
    if (isByPointer && !isOpening && control instanceof HTMLElement) control.blur();
  }

  return {
    pointerdown: () => (isByPointer = true),
    keydown: () => (isByPointer = false),
    change: giveBack,
    click: giveBack,
  };
}
