import { copyFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type MadeScene, makeScene } from '../../fixtures/scenes.ts';
import { fill, graveFaults, mark, openFootageByPath, openSheetByPath, shownFrame } from './actions.ts';
import { type OpenWindow, openWindow } from './openWindow.ts';

/** What goes wrong or is left undone, and many drops in a row; each test goes on where the one before it ended. */
describe('in the window', () => {
  let window: OpenWindow;
  let made: MadeScene;

  beforeAll(async () => {
    window = await openWindow();
    made = await makeScene('clean', join(window.folder, 'drops'));
    copyFileSync(made.footagePath, join(window.folder, 'drops', 'drop2.mkv'));
  });
  afterAll(() => window?.close());

  it('footage that is not there, or no footage at all, is refused in one line that stays until it is closed', async () => {
    const { page, folder } = window;
    await openFootageByPath(page, join(folder, 'nowhere.mp4'));
    const line = page.getByRole('alert');
    await line.waitFor();
    expect(await line.textContent()).toContain('nowhere.mp4');
    await line.getByRole('button', { name: 'Close this message' }).click();
    expect(await line.count()).toBe(0);
    const text = join(folder, 'notes.mp4');
    writeFileSync(text, 'not a video\n');
    await openFootageByPath(page, text);
    await line.waitFor();
    expect(await line.locator('span').textContent()).toMatch(/^[^\n]*notes\.mp4[^\n]*$/);
    expect(await graveFaults(page, 'header')).toEqual([]);
  });

  it('a folder is looked through by mouse, and the file picked there is opened', async () => {
    const { page } = window;
    await page.getByRole('banner').getByRole('button', { name: 'Open footage…' }).click();
    const dialog = page.getByRole('dialog', { name: 'Open footage' });
    await dialog.getByRole('button', { name: 'drops/' }).click();
    await dialog.getByRole('button', { name: 'drop.mkv' }).waitFor();
    expect(await graveFaults(page, 'dialog[open]')).toEqual([]);
    await dialog.getByRole('button', { name: 'drop.mkv' }).click();
    await shownFrame(page, 0);
  });

  it('a sheet that lacks something is not reduced: the first field is named and has the focus, each problem stands at its field', async () => {
    const { page } = window;
    await page.keyboard.press('Control+Enter');
    await page
      .getByText(/^clock\.captureRateHz: is missing; state it \(and \d+ more in the sheet\)$/)
      .waitFor();
    const rate = page.locator('[id="field-clock.captureRateHz"]');
    await expect.poll(() => rate.evaluate((field) => field === document.activeElement)).toBe(true);
    const said = page.locator('[id="clock.captureRateHz-problem"]');
    expect(await said.textContent()).toBe('is missing; state it');
    await rate.fill('fast');
    expect(await said.textContent()).toBe('"fast" is not a number');
    await rate.fill('1,000');
    expect(await said.textContent()).toContain('has a comma');
    await rate.fill('1000 fps');
    expect(await said.textContent()).toContain('"fps" is not a unit of this field; it takes Hz');
    await rate.fill('0');
    expect(await said.textContent()).toContain('must be greater than 0');
    await rate.fill('1000');
    expect(await said.count()).toBe(0);
  });

  it('a sheet that is in no file is not left without asking', async () => {
    const { page } = window;
    const rate = page.locator('[id="field-clock.captureRateHz"]');
    await page.getByRole('button', { name: 'New sheet' }).click();
    const dialog = page.getByRole('dialog', { name: 'Not saved' });
    await dialog.getByText('What was changed in the sheet is in no file').waitFor();
    expect(await graveFaults(page, 'dialog[open]')).toEqual([]);
    await dialog.getByRole('button', { name: 'Stay' }).click();
    expect(await rate.inputValue()).toBe('1000');
    await page.getByRole('button', { name: 'New sheet' }).click();
    await dialog.getByRole('button', { name: 'Go on without saving' }).click();
    expect(await rate.inputValue()).toBe('');
  });

  it('a cancelled reduction leaves the window as it was', async () => {
    const { page } = window;
    await openSheetByPath(page, made.sheetPath);
    await page.keyboard.press('Control+Enter');
    await page.getByText(/\d+ of \d+ frames/).waitFor();
    await page.getByRole('status').getByRole('button', { name: 'Cancel' }).click();
    await page.getByRole('progressbar', { name: 'Reduction' }).waitFor({ state: 'detached' });
    expect(await page.getByRole('alert').count()).toBe(0);
    expect(await page.locator('.lanes').count()).toBe(0);
    await page.getByRole('button', { name: 'Reduce' }).and(page.locator(':enabled')).waitFor();
  });

  it('a mark is brought into view when it is selected, and stays there when the zoom changes', async () => {
    const { page } = window;
    const inView = async (name: string) => {
      const view = await page.locator('#stage-view').boundingBox();
      const at = await mark(page, name).boundingBox();
      if (!view || !at) return false;
      const [x, y] = [at.x + at.width / 2 - view.x, at.y + at.height / 2 - view.y];
      return x > 0 && x < view.width && y > 0 && y < view.height;
    };
    await page.getByRole('button', { name: '4×' }).click();
    for (const name of ['Scale bar end A', 'Scale bar end B'] as const) {
      await page.getByRole('form', { name: 'Sheet' }).getByRole('button', { name }).click();
      await expect.poll(() => inView(name)).toBe(true);
    }
    expect(await inView('Scale bar end A')).toBe(false); // else neither would have had to be brought
    await page.getByRole('button', { name: '2×' }).click();
    await expect.poll(() => inView('Scale bar end B')).toBe(true);
    await page.getByRole('button', { name: '4×' }).click();
    await expect.poll(() => inView('Scale bar end B')).toBe(true);
    await page.keyboard.press('Control+ArrowUp');
    await page.keyboard.press('Control+ArrowUp');
    await page.keyboard.press('Control+ArrowUp');
    await page.keyboard.press('Control+ArrowUp');
    await expect.poll(() => inView('Scale bar end B')).toBe(false);
    await page.keyboard.press('Escape');
    await page.getByRole('button', { name: 'Fit' }).click();
  });

  it('a reduction that still runs is not taken over to another drop', async () => {
    const { page } = window;
    await page.keyboard.press('Control+Enter');
    await page.getByText(/\d+ of \d+ frames/).waitFor();
    await page.getByRole('button', { name: 'Next drop' }).click();
    const dialog = page.getByRole('dialog', { name: 'Not saved' });
    await dialog.getByText('A reduction is running; it is cancelled when you go on.').waitFor();
    await dialog.getByRole('button', { name: 'Go on without saving' }).click();
    await page.locator('.stage-name').getByText('drop2.mkv').waitFor();
    await page.getByRole('progressbar', { name: 'Reduction' }).waitFor({ state: 'detached' });
    expect(await page.locator('.lanes').count()).toBe(0);
    expect(await page.getByRole('button', { name: 'Save to log' }).isEnabled()).toBe(false);
  });

  it('the next drop keeps the sheet; its marks are stale until they are set again or said to be right', async () => {
    const { page } = window;
    const stateOf = (part: string) =>
      page.getByRole('region', { name: part }).locator('.part-state').textContent();
    await page.locator('.stage-name').getByText('drop2.mkv').waitFor();
    await shownFrame(page, 0);
    expect(await page.locator('[id="field-clock.captureRateHz"]').inputValue()).toBe('1000');
    expect(await stateOf('Clock')).toContain('settled');
    expect(await stateOf('Scale')).toContain('stale');
    expect(await stateOf('Bodies')).toContain('stale');
    await page.getByRole('region', { name: 'Scale' }).getByRole('button', { name: 'Still right' }).click();
    expect(await stateOf('Scale')).toContain('settled');
    await mark(page, 'Body tip').focus();
    await page.keyboard.press('Shift+ArrowDown');
    expect(await stateOf('Bodies')).toContain('settled');
  });

  it('a sheet is saved and opened again as it was', async () => {
    const { page, folder } = window;
    const path = join(folder, 'drops', 'kept.json');
    await fill(page, 'tether.lengthM', '455.5 mm');
    await fill(page, 'tether.uLengthM', '0,5 mm'); // left out of the file it would be gone without a word
    await page.keyboard.press('Control+s');
    await page
      .getByRole('alert')
      .getByText(/^tether\.uLengthM: "0,5 mm" has a comma.* put it right, then save the sheet$/)
      .waitFor();
    expect(await page.locator('dialog[open]').count()).toBe(0);
    await fill(page, 'tether.uLengthM', '0.5 mm');
    await page.keyboard.press('Control+s');
    await page.getByLabel('File name or whole path').fill(path);
    await page.keyboard.press('Enter');
    await page.getByText(`Saved as ${path}`).waitFor();
    await page.getByRole('button', { name: 'New sheet' }).click();
    expect(await page.locator('[id="field-tether.lengthM"]').inputValue()).toBe('');
    await openSheetByPath(page, path);
    await expect.poll(() => page.locator('[id="field-tether.lengthM"]').inputValue()).toBe('0.4555');
    expect(await page.locator('.sheet-part .path').textContent()).toBe('drop2.mkv'); // beside the sheet
  });

  it('the cautions for a drop area are one key away, and axe finds nothing serious in them or in the log', async () => {
    const { page } = window;
    await page.getByRole('tab', { name: 'Drop area cautions' }).click();
    for (const what of [
      'Falling bodies',
      'Whipping tether',
      'Stored energy',
      'Exclusion zone',
      'Eye protection',
      'Strobe light',
    ])
      await page.getByRole('term').filter({ hasText: what }).waitFor();
    expect(await graveFaults(page, '.side')).toEqual([]);
    await page.getByRole('tab', { name: 'Log' }).click();
    await page.getByText('Nothing is saved yet.').waitFor();
    expect(await graveFaults(page, '.side')).toEqual([]);
  });

  it('nothing of this made the browser complain', () => {
    expect(window.complaints).toEqual([]);
  });
});
