import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect } from 'vitest';
import { accessibilityFaults, overflowing } from './faults.ts';
import { pageTest } from './open-page.ts';
import { VIEWS } from './views.ts';

let folder: string;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'quietcorner-page-'));
});
afterAll(() => rm(folder, { recursive: true }));

async function page(name: string, body: string): Promise<string> {
  const path = join(folder, `${name}.html`);
  const style = 'body { background: Canvas; color: CanvasText; color-scheme: light dark; margin: 1rem }';
  await writeFile(
    path,
    `<!doctype html><html lang="en"><meta charset="utf-8"><title>${name}</title><style>${style}</style><main><h1>${name}</h1>${body}</main></html>`,
  );
  return path;
}

describe('what the page tests look for is found where it is, and only there', () => {
  pageTest('a good page has no fault', async ({ openPage }) => {
    const path = await page(
      'good',
      '<p>Nothing wrong here.</p><p style="width: 100%; overflow-x: auto"><b style="display: block; width: 3000px">wide</b></p>',
    );
    for (const view of VIEWS) {
      const opened = await openPage(path, view);
      expect(opened.requests).toEqual([]);
      expect(opened.complaints).toEqual([]);
      expect(await overflowing(opened.page)).toEqual([]);
      expect(await accessibilityFaults(opened.page)).toEqual([]);
    }
  });

  pageTest('a request is seen', async ({ openPage }) => {
    const opened = await openPage(await page('request', '<img alt="" src="http://127.0.0.1:9/picture.png">'));
    expect(opened.requests).toEqual(['http://127.0.0.1:9/picture.png']);
  });

  pageTest('errors are seen, those on the console and those nobody caught', async ({ openPage }) => {
    const opened = await openPage(
      await page('errors', "<script>console.error('said'); throw new Error('thrown')</script>"),
    );
    expect(opened.complaints).toEqual(expect.arrayContaining(['said', 'thrown']));
  });

  pageTest('what reaches beyond the window is seen', async ({ openPage }) => {
    const path = await page('wide', '<p style="width: 600px">six hundred</p>');
    expect(await overflowing((await openPage(path, { width: 390, scheme: 'light' })).page)).toEqual(['p six hundred']);
    expect(await overflowing((await openPage(path, { width: 1280, scheme: 'light' })).page)).toEqual([]);
  });

  pageTest('a picture without words for it and text too pale are seen', async ({ openPage }) => {
    const opened = await openPage(
      await page('pale', '<img src="data:,"><p style="color: #bbb; background: #fff">pale</p>'),
    );
    const faults = (await accessibilityFaults(opened.page)).map((fault) => fault.split(':')[0]);
    expect(faults.sort()).toEqual(['color-contrast', 'image-alt']);
  });

  pageTest('the colour scheme asked for is the one the page sees', async ({ openPage }) => {
    const path = await page('scheme', '');
    for (const view of VIEWS) {
      const { page: opened } = await openPage(path, view);
      const dark = await opened.evaluate(() => matchMedia('(prefers-color-scheme: dark)').matches);
      expect(dark).toBe(view.scheme === 'dark');
    }
  });
});
