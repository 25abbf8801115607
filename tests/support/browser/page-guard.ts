import type { BrowserContext, ConsoleMessage, Request, Response } from 'playwright-core';

interface ExpectedAnswer {
  status: number;
  url: RegExp;
}

const ownProtocols = new Set(['data:', 'blob:', 'about:']);

// Runs in the page, so it is text: the console is the way out.
const policyReporter = `document.addEventListener('securitypolicyviolation', (event) => {
  console.error('Content security policy: ' + event.effectiveDirective + ' refused ' + event.blockedURI);
})`;

/**
 * Watches every page of a context and keeps what a person's browser would complain about: console errors, uncaught errors,
 * refusals by the content security policy, requests to another origin, and answers of 400 and above that no test declared.
 */
export class PageGuard {
  readonly complaints: string[] = [];
  readonly #origin: string;
  readonly #expected: ExpectedAnswer[] = [];
  readonly #expectedLines: RegExp[] = [];

  constructor(origin: string) {
    this.#origin = origin;
  }

  async watch(context: BrowserContext): Promise<void> {
    context.on('console', (message) => this.#onConsole(message));
    context.on('weberror', (webError) => this.#complain(`Uncaught: ${webError.error().message}`));
    context.on('request', (request) => this.#onRequest(request));
    context.on('response', (response) => this.#onResponse(response));
    await context.addInitScript(policyReporter);
  }

  /** Declares that an answer of this status, from an address that matches, belongs to the test. */
  expectAnswer(status: number, url: RegExp): void {
    this.#expected.push({ status, url });
  }

  /** Declares that a console error that matches belongs to the test, such as the browser's own line when it is offline. */
  expectConsoleError(text: RegExp): void {
    this.#expectedLines.push(text);
  }

  /** Throws when there was anything to complain about. */
  verify(): void {
    if (this.complaints.length === 0) return;
    throw new Error(`The browser complained:\n${this.complaints.join('\n')}`);
  }

  #complain(complaint: string): void {
    this.complaints.push(complaint);
  }

  #isExpected(status: number, url: string): boolean {
    return this.#expected.some((answer) => answer.status === status && answer.url.test(url));
  }

  #onConsole(message: ConsoleMessage): void {
    if (message.type() !== 'error') return;
    // The browser writes a line of its own for each bad answer; #onResponse judges those with their status.
    if (/^Failed to load resource: the server responded with a status of/.test(message.text())) return;
    if (this.#expectedLines.some((line) => line.test(message.text()))) return;
    this.#complain(`Console: ${message.text()} (${message.location().url})`);
  }

  #onRequest(request: Request): void {
    const url = new URL(request.url());
    if (ownProtocols.has(url.protocol) || url.origin === this.#origin) return;
    this.#complain(`Request to another origin: ${url.href}`);
  }

  #onResponse(response: Response): void {
    const status = response.status();
    if (status < 400 || this.#isExpected(status, response.url())) return;
    this.#complain(`Answer ${status}: ${response.request().method()} ${response.url()}`);
  }
}
