import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { chromium, type BrowserContext } from 'playwright-core';
import { testVariable } from './environment';

/** Nothing but the loopback can be reached: a screen that asked for anything outside would fail its test. */
const FLAGS = [
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
  '--no-first-run',
  '--disable-default-apps',
  '--host-resolver-rules=MAP * ~NOTFOUND , EXCLUDE 127.0.0.1',
];

export interface BrowserOptions {
  readonly viewport?: { readonly width: number; readonly height: number };
  readonly colorScheme?: 'light' | 'dark';
}

export interface TestBrowser {
  /** One person's browser, with their own cookies. */
  readonly context: BrowserContext;
  readonly close: () => Promise<void>;
}

function chromiumPath(): string {
  const found = [process.env['TEST_CHROMIUM'], '/usr/bin/chromium'].find((path) => path !== undefined && existsSync(path));
  if (found === undefined) throw new Error('chromium is not on this machine (Debian: chromium).');
  return found;
}

/** Starts Debian's chromium on a profile of its own. Four people in one story are four of these. */
export async function openBrowser({ viewport = { width: 1440, height: 900 }, colorScheme = 'light' }: BrowserOptions = {}): Promise<TestBrowser> {
  const profile = mkdtempSync(join(testVariable('TEST_DATA_DIR'), 'profile-'));
  const context = await chromium.launchPersistentContext(profile, {
    executablePath: chromiumPath(),
    headless: true,
    // Chromium cannot set up its sandbox as root, nor in most containers; it sees nothing here but our own pages.
    chromiumSandbox: false,
    args: [...FLAGS, '--disable-dev-shm-usage'],
    viewport,
    colorScheme,
    reducedMotion: 'reduce',
  });
  return {
    context,
    close: async () => {
      await context.close();
      rmSync(profile, { recursive: true, force: true });
    },
  };
}
