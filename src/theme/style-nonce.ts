/**
 * Gives every `<style>` element the nonce of the page. The component library injects its styles while it renders
 * and never passes on the nonce it is configured with, so the content security policy would refuse them.
 */
export function giveStylesTheNonce(page: Document = document): void {
  const nonce = page.querySelector<HTMLMetaElement>('meta[name="csp-nonce"]')?.content;
  if (!nonce) return;
  const createElement = page.createElement.bind(page);
  page.createElement = function createWithNonce(name: string, options?: ElementCreationOptions): HTMLElement {
    const element = createElement(name, options);
    if (name.toLowerCase() === 'style') element.setAttribute('nonce', nonce);
    return element;
  };
}
