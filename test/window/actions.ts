import { AxeBuilder } from '@axe-core/playwright';
import type { Page } from 'playwright-core';

/** Opens footage by typing its path, as the keyboard does it. */
export async function openFootageByPath(page: Page, path: string): Promise<void> {
  await page.keyboard.press('Control+o');
  await page.getByLabel('Whole path').fill(path);
  await page.keyboard.press('Enter');
}

export async function openSheetByPath(page: Page, path: string): Promise<void> {
  await page.getByRole('banner').getByRole('button', { name: 'Open sheet…' }).click();
  await page.getByLabel('Whole path').fill(path);
  await page.keyboard.press('Enter');
  await page.getByRole('form', { name: 'Sheet' }).getByText(path).waitFor();
  await shownFrame(page, 0);
}

/** Waits until the picture on the screen is that frame. */
export async function shownFrame(page: Page, n: number): Promise<void> {
  await page.locator(`.picture canvas[data-frame="${n}"]`).waitFor();
}

/** Fills a number field by its place in the sheet. */
export async function fill(page: Page, field: string, value: number | string | undefined): Promise<void> {
  if (value !== undefined) await page.locator(`[id="field-${field}"]`).fill(String(value));
}

/** Selects a mark in the sheet and clicks on the whole pixel that is nearest to its place; needs zoom 1×. */
export async function clickMark(page: Page, name: string, at: { x: number; y: number }): Promise<void> {
  await page.getByRole('form', { name: 'Sheet' }).getByRole('button', { name }).click();
  await page.locator('.picture').click({ position: { x: Math.round(at.x), y: Math.round(at.y) } });
  await mark(page, name).waitFor();
}

export function mark(page: Page, name: string) {
  return page.locator('.picture').getByRole('button', { name });
}

/** What axe finds grave in the window as it is now, or in one part of it. */
export async function graveFaults(page: Page, part = 'body'): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).include(part).analyze();
  return violations
    .filter((v) => v.impact === 'serious' || v.impact === 'critical')
    .map((v) => `${v.id}: ${v.nodes.map((n) => n.html).join(' | ')}`);
}

/** The key values as they are read off the table. */
export async function readKeyValues(page: Page): Promise<Record<string, string>> {
  await page.locator('.key-values').waitFor();
  return page
    .locator('.key-values tr[data-quantity]')
    .evaluateAll((rows) =>
      Object.fromEntries(
        rows.map((row) => [row.getAttribute('data-quantity'), row.querySelector('td')?.textContent ?? '']),
      ),
    );
}

/** Value and expanded uncertainty of "(9.807 ± 0.024) m/s²". */
export function measuredIn(text: string): { value: number; expanded: number } {
  const [, value, expanded] = /^\(?(\u2212?[\d.]+) ± ([\d.]+)/.exec(text) ?? [];
  if (value === undefined || expanded === undefined) throw new Error(`not a measured value: ${text}`);
  return { value: Number(value.replace('\u2212', '-')), expanded: Number(expanded) };
}
