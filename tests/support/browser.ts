import { chromium } from 'playwright-core';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { inject } from 'vitest';
import { chromiumProgram, ensureChromium } from '../../server/bootstrap/chromium.mjs';

export interface PageOptions {
  readonly theme?: 'light' | 'dark';
  readonly viewport?: { readonly width: number; readonly height: number };
  /** Cookies and storage of an earlier page, as when a browser is opened again. */
  readonly storageState?: Awaited<ReturnType<BrowserContext['storageState']>>;
}

export interface TestBrowser {
  /** A page with cookies and storage of its own, whose relative addresses lead to the running application. */
  newPage(options?: PageOptions): Promise<Page>;
  close(): Promise<void>;
}

/** Starts Debian's Chromium; once per test file, since it takes a second. */
export async function launchBrowser(): Promise<TestBrowser> {
  await ensureChromium({ say: console.log });
  const browser: Browser = await chromium.launch({
    executablePath: chromiumProgram,
    headless: true,
    // As root its sandbox cannot start; the rest keeps it from looking for hosts beyond this machine.
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
  return {
    async newPage({ theme = 'light', viewport = { width: 1440, height: 900 }, storageState } = {}) {
      const context = await browser.newContext({
        baseURL: inject('baseUrl'),
        colorScheme: theme,
        viewport: { ...viewport },
        locale: 'en-GB',
        timezoneId: 'UTC',
        ...(storageState === undefined ? {} : { storageState }),
      });
      return context.newPage();
    },
    close: () => browser.close(),
  };
}
