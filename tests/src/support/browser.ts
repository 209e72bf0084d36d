import { existsSync } from 'node:fs';
import { chromium, type Browser } from 'playwright-core';

/** Debian's Chromium; `CHROMIUM` points to another one. */
const executablePath = process.env.CHROMIUM ?? '/usr/bin/chromium';

/** Page tests are skipped where no browser is installed; their title says why. */
export const hasBrowser = existsSync(executablePath);

export function launchBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath,
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  });
}
