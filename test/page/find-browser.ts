import type { TestProject } from 'vitest/node';
import { type FoundBrowser, findBrowser } from './browser.ts';

declare module 'vitest' {
  interface ProvidedContext {
    browser: FoundBrowser | null;
  }
}

/** Global set-up of the page tests: finds a browser once. Under CI a missing one is an error. */
export default async function (project: TestProject): Promise<void> {
  const browser = await findBrowser();
  if (browser === null && process.env['CI']) throw new Error('page tests: no browser starts on this machine');
  if (browser === null) process.stderr.write('page tests skipped: no browser starts on this machine\n');
  project.provide('browser', browser);
}
