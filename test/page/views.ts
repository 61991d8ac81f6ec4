import { pathToFileURL } from 'node:url';
import type { Browser, Page } from 'playwright-core';

/** How a page is looked at. */
export interface View {
  /** Width of the window, pixels. */
  readonly width: number;
  readonly scheme: 'light' | 'dark';
}

/** Every view that a page of ours must stand: desktop and phone, light and dark. */
export const VIEWS: readonly View[] = [1280, 390].flatMap((width) => [
  { width, scheme: 'light' },
  { width, scheme: 'dark' },
]);

/** An opened page and what it did meanwhile. */
export interface OpenedPage {
  readonly page: Page;
  /** Requests for anything but the file itself and what it carries inside it. */
  readonly requests: string[];
  /** Errors and warnings on the console, and errors nobody caught. */
  readonly complaints: string[];
}

/** Opens a file in a fresh context of `browser` and listens from the first byte on. */
export async function openFile(browser: Browser, path: string, { width, scheme }: View): Promise<OpenedPage> {
  const context = await browser.newContext({
    viewport: { width, height: width < 600 ? 844 : 900 },
    colorScheme: scheme,
    reducedMotion: 'reduce',
  });
  const page = await context.newPage();
  const url = pathToFileURL(path).href;
  const requests: string[] = [];
  const complaints: string[] = [];
  page.on('request', (request) => {
    if (request.url() !== url && !/^(data|blob):/.test(request.url())) requests.push(request.url());
  });
  page.on('console', (message) => {
    if (['error', 'warning'].includes(message.type())) complaints.push(message.text());
  });
  page.on('pageerror', (error) => complaints.push(error.message));
  await page.goto(url, { waitUntil: 'load' });
  await page.evaluate(() => document.fonts.ready.then(() => undefined));
  return { page, requests, complaints };
}
