import type { Browser } from 'playwright-core';
import { inject, test } from 'vitest';
import { launch } from './browser.ts';
import { type OpenedPage, openFile, VIEWS, type View } from './views.ts';

interface Fixtures {
  browser: Browser;
  /** Opens a file, at 1280 pixels and in light colours unless told otherwise; closed when the test ends. */
  openPage: (path: string, view?: View) => Promise<OpenedPage>;
}

const withPages = test.extend<Fixtures>({
  browser: [
    // biome-ignore lint/correctness/noEmptyPattern: vitest reads from the pattern which fixtures this one needs.
    async ({}, use) => {
      const browser = await launch(inject('browser')!);
      await use(browser);
      await browser.close();
    },
    { scope: 'file' },
  ],
  openPage: async ({ browser }, use) => {
    await use((path, view = VIEWS[0]) => openFile(browser, path, view));
    for (const context of browser.contexts()) await context.close();
  },
});

/** `test` of the page project; where no browser was found, which is possible outside CI only, its tests are skipped. */
export const pageTest = withPages.skipIf(inject('browser') === null);
