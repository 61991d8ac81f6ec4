/**
 * Takes pictures of a page, to be looked at: npx tsx test/page/shoot.ts FILE.html FOLDER
 * writes the whole page from the top down as FOLDER/{1280,390}-{light,dark}-{1,2,...}.png, and FOLDER/print.pdf.
 */
import { mkdir } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { findBrowser, launch } from './browser.ts';
import { openFile, VIEWS } from './views.ts';

/** Height of one picture, pixels: a taller one cannot be read when it is shown whole. */
const PIECE = 1400;

const [file, folder] = process.argv.slice(2);
if (!file || !folder) throw new Error('usage: npx tsx test/page/shoot.ts FILE.html FOLDER');
const found = await findBrowser();
if (!found) throw new Error('no browser starts on this machine');

await mkdir(folder, { recursive: true });
const browser = await launch(found);
for (const view of VIEWS) {
  const { page, requests, complaints } = await openFile(browser, resolve(file), view);
  // Charts have drawn themselves by then.
  await wait(500);
  const pageHeight = await page.evaluate(() => document.documentElement.scrollHeight);
  for (let top = 0; top < pageHeight; top += PIECE) {
    const path = join(folder, `${view.width}-${view.scheme}-${top / PIECE + 1}.png`);
    const clip = { x: 0, y: top, width: view.width, height: Math.min(PIECE, pageHeight - top) };
    await page.screenshot({ path, fullPage: true, clip });
    process.stdout.write(`${path}\n`);
  }
  for (const fault of [...requests, ...complaints]) process.stdout.write(`  ${fault}\n`);
}
const { page } = await openFile(browser, resolve(file), VIEWS[0]);
await wait(500);
await page.pdf({ path: join(folder, 'print.pdf'), format: 'A4' });
process.stdout.write(`${join(folder, 'print.pdf')}\n`);
await browser.close();
