/** The system's Chromium, driven headless. */
import { existsSync } from 'node:fs';
import { type Browser, chromium } from 'playwright-core';

/** Debian's package `chromium`. */
const PROGRAM = process.env['HOLDFAST_CHROMIUM'] ?? '/usr/bin/chromium';

export const HAS_CHROMIUM = existsSync(PROGRAM);
if (!HAS_CHROMIUM) console.warn(`left out: tests in a browser need ${PROGRAM} (Debian package chromium)`);

export function launch(): Promise<Browser> {
  return chromium.launch({
    executablePath: PROGRAM,
    args: ['--no-sandbox', '--disable-gpu', '--disable-background-networking', '--disable-dev-shm-usage'],
  });
}
