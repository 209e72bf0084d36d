import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, describe, expect } from 'vitest';
import { hasBrowser, launchBrowser } from './browser';
import { startClientServer, type ClientServer } from './client-server';
import type { FakeApi } from './fake-api';

export interface PageOptions {
  readonly width?: number;
  readonly theme?: 'light' | 'dark';
}
export type OpenPage = (api: FakeApi, path: string, options?: PageOptions) => Promise<Page>;

/**
 * A group of tests that drive the built client in a browser against a fake API. Every page has a context of its
 * own; an error that the page throws fails the test that opened it.
 */
export function describePages(title: string, define: (open: OpenPage) => void): void {
  describe.skipIf(!hasBrowser)(hasBrowser ? title : `${title} (skipped: no Chromium; set CHROMIUM)`, () => {
    let server: ClientServer;
    let browser: Browser;
    let contexts: BrowserContext[] = [];
    const pageErrors: Error[] = [];
    beforeAll(async () => {
      [server, browser] = await Promise.all([startClientServer(), launchBrowser()]);
    }, 120_000);
    afterAll(async () => {
      await browser.close();
      await server.close();
    });
    afterEach(async () => {
      await Promise.all(contexts.map((context) => context.close()));
      contexts = [];
      expect(pageErrors.splice(0)).toEqual([]);
    });
    define(async (api, path, { width = 1440, theme = 'light' } = {}) => {
      const context = await browser.newContext({
        viewport: { width, height: width < 720 ? 844 : 900 },
        colorScheme: theme,
        reducedMotion: 'reduce',
        permissions: ['clipboard-read', 'clipboard-write'],
      });
      contexts.push(context);
      const page = await context.newPage();
      page.setDefaultTimeout(15_000);
      page.on('pageerror', (error) => pageErrors.push(error));
      await api.attach(page);
      await page.goto(server.url + path);
      return page;
    });
  });
}
