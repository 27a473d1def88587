import { chromium, type Browser } from 'playwright-core';
import { findExecutable } from '../../scripts/lib/debian.mjs';

/** Starts the browser named by CHROMIUM, else the `chromium` on PATH; no browser is a failure, never a skip. */
export async function launchChromium(): Promise<Browser> {
  const executablePath = process.env['CHROMIUM'] || findExecutable('chromium');
  if (!executablePath) {
    throw new Error('No Chromium: install the Debian package chromium, or set CHROMIUM to its path.');
  }
  return chromium.launch({
    executablePath,
    args: [
      '--headless=new',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
      // Chromium's sandbox refuses root, as which containers run tests.
      ...(process.getuid?.() === 0 ? ['--no-sandbox'] : []),
    ],
  });
}
