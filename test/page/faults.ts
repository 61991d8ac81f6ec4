import axe, { type AxeResults } from 'axe-core';
import type { Page } from 'playwright-core';

/** What axe-core calls serious or critical, one line each: rule, and the first place. */
export async function accessibilityFaults(page: Page): Promise<string[]> {
  await page.evaluate(axe.source);
  const { violations } = await page.evaluate(() =>
    (globalThis as unknown as { axe: { run(): Promise<AxeResults> } }).axe.run(),
  );
  return violations
    .filter(({ impact }) => impact === 'serious' || impact === 'critical')
    .map(({ id, nodes }) => `${id}: ${nodes.length} places, first ${nodes[0].html.slice(0, 200)}`);
}

/** Elements that reach beyond the right or left edge of the window and stand in nothing that scrolls or clips them away. */
export function overflowing(page: Page): Promise<string[]> {
  return page.evaluate(() => {
    const width = document.documentElement.clientWidth;
    const contained = (element: Element) => {
      for (let up = element.parentElement; up && up !== document.body; up = up.parentElement) {
        if (getComputedStyle(up).overflowX !== 'visible') return true;
      }
      return false;
    };
    return [...document.body.querySelectorAll('*')]
      .filter((element) => {
        const box = element.getBoundingClientRect();
        return box.width > 0 && (box.right > width + 1 || box.left < -1) && !contained(element);
      })
      .map((element) => `${element.tagName.toLowerCase()} ${(element.textContent ?? '').trim().slice(0, 60)}`);
  });
}
