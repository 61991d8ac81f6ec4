import { fileURLToPath } from 'node:url';
import { describe, expect } from 'vitest';
import { accessibilityFaults, overflowing } from './faults.ts';
import { pageTest } from './open-page.ts';
import { VIEWS } from './views.ts';

const report = fileURLToPath(new URL('../../reports/example/cabin-active.report.html', import.meta.url));

describe.each(VIEWS)('the example report, $width pixels wide, $scheme', (view) => {
  pageTest('asks for nothing and complains of nothing', async ({ openPage }) => {
    const { page, requests, complaints } = await openPage(report, view);
    expect(await page.title()).not.toBe('');
    expect(requests).toEqual([]);
    expect(complaints).toEqual([]);
  });

  pageTest('has nothing beyond the edges of the window', async ({ openPage }) => {
    const { page } = await openPage(report, view);
    expect(await overflowing(page)).toEqual([]);
  });

  pageTest('has no serious fault of accessibility', async ({ openPage }) => {
    const { page } = await openPage(report, view);
    expect(await accessibilityFaults(page)).toEqual([]);
  });
});
