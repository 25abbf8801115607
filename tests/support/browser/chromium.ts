import { chromium, type Browser } from 'playwright-core';
import { ensureChromium } from '../../../server/setup/chromium.mjs';

// Nothing of the browser's own housekeeping may reach the network or stand between a test and the page.
const quietArguments = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
  '--autoplay-policy=no-user-gesture-required',
];

export async function launchChromium(): Promise<Browser> {
  return chromium.launch({
    executablePath: await ensureChromium(),
    headless: true,
    args: quietArguments,
  });
}
