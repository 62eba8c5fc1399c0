import { readFileSync } from 'node:fs';
import { mkdir, rename } from 'node:fs/promises';
import { join } from 'node:path';
import { afterAll, beforeAll, expect } from 'vitest';
import { chromiumPath, Journey, journey } from './journey.ts';
import { runSheetTexts } from './read-page.ts';

let way: Journey;
beforeAll(async () => {
  if (chromiumPath !== null) way = await Journey.start();
});
afterAll(() => way?.end());

/** Lets something fall onto the page, as a file manager would. */
async function drop(name: string, content: string | Buffer): Promise<void> {
  const bytes = Buffer.from(content).toString('base64');
  await way.page.evaluate(`{
    const bytes = Uint8Array.from(atob(${JSON.stringify(bytes)}), (c) => c.charCodeAt(0));
    const transfer = new DataTransfer();
    transfer.items.add(new File([bytes], ${JSON.stringify(name)}));
    for (const type of ['dragenter', 'dragover', 'drop'])
      window.dispatchEvent(new DragEvent(type, { dataTransfer: transfer, bubbles: true, cancelable: true }));
  }`);
}

journey('a wrong file dropped is refused in the page, with what to do', async () => {
  const { page } = way;
  await drop('notes.txt', 'wait 20 s');
  await page.getByText(/notes\.txt is not a clip: drop videos/).waitFor();
  await drop('empty.mp4', 'this is no video');
  await page.getByText(/empty\.mp4/).waitFor();
  expect(await page.getByText('Drop a folder of clips here to start a test').isVisible()).toBe(true);
});

journey('a clip dropped while nothing is open starts a test with its drive frequency', async () => {
  const { page } = way;
  const folder = await way.clips('card', (path) => path.includes('gap3_2.'));
  const { readdirSync } = await import('node:fs');
  const [name = ''] = readdirSync(folder).filter((each) => each.endsWith('.mp4'));
  await drop('2,25 Hz.mp4', readFileSync(join(folder, name)));
  await page.getByRole('grid', { name: 'Dwells' }).waitFor();
  await expect.poll(async () => (await runSheetTexts(page))[0]?.[0]).toBe('2.250');
});

journey('drive frequencies that no name tells are asked for in one table', async () => {
  const { page } = way;
  const folder = join(way.folder, 'unnamed');
  await mkdir(folder);
  const { readdirSync, copyFileSync } = await import('node:fs');
  const clips = readdirSync(join(way.folder, 'card')).filter((each) => each.endsWith('.mp4'));
  for (const [index, clip] of clips.slice(0, 2).entries())
    copyFileSync(join(way.folder, 'card', clip), join(folder, `IMG_${index + 1}.mp4`));
  await page.getByRole('button', { name: 'Menu' }).click();
  await page.getByRole('menuitem', { name: 'Add a folder of clips' }).click();
  await way.chooseFolder('unnamed');
  await page.getByLabel('Drive frequency of img-1, Hz').fill('1,5');
  if (clips.length > 1) await page.getByLabel('Drive frequency of img-2, Hz').fill('abc');
  await page
    .getByText('a number above 0 is expected')
    .first()
    .waitFor({ state: clips.length > 1 ? 'visible' : 'hidden' });
  if (clips.length > 1) await page.getByLabel('Drive frequency of img-2, Hz').fill('2.5');
  await page.getByRole('button', { name: 'Take these' }).click();
  await expect.poll(async () => (await runSheetTexts(page)).map(([hz]) => hz)).toContain('1.500');
});

journey('rows are typed by keyboard with a decimal comma, and pasted from a spreadsheet', async () => {
  const { page } = way;
  const before = (await runSheetTexts(page)).length;
  await page.keyboard.press('Control+Enter');
  await expect.poll(async () => (await runSheetTexts(page)).length).toBe(before + 1);
  const cell = page.locator('tr[aria-selected=true] [data-column="0"]');
  await cell.click();
  await page.keyboard.type('1,62');
  await page.keyboard.press('Enter');
  await expect.poll(async () => (await runSheetTexts(page)).map(([hz]) => hz)).toContain('1.620');
  await page.evaluate(`{
    const transfer = new DataTransfer();
    transfer.setData('text/plain', 'Hz\\tmm\\n3,1\\t12,5\\n3.2\\t11.0 ± 0.2\\n');
    document.querySelector('.rows table').dispatchEvent(
      new ClipboardEvent('paste', { clipboardData: transfer, bubbles: true, cancelable: true }));
  }`);
  await expect
    .poll(async () => (await runSheetTexts(page)).map((row) => row.slice(0, 2).join(' ')))
    .toContain('3.200 11.00 ±0.20');
});

journey('killed at once after a change, nothing is missing when it is started again', async () => {
  const { page } = way;
  await page.getByRole('textbox', { name: 'Title of the test' }).fill('after the kill');
  await page.keyboard.press('Enter');
  await page.getByRole('button', { name: 'Menu' }).click();
  await page.getByRole('menuitem', { name: 'Undo: rename the test' }).waitFor();
  const rows = await runSheetTexts(page);
  way.kill();
  await way.startAgain();
  await page
    .getByRole('listitem')
    .getByRole('button', { name: /^after the kill/ })
    .click();
  await page.getByRole('grid', { name: 'Dwells' }).waitFor();
  expect(await page.getByRole('textbox', { name: 'Title of the test' }).inputValue()).toBe('after the kill');
  expect((await runSheetTexts(page)).map(([hz]) => hz)).toEqual(rows.map(([hz]) => hz));
});

journey('clips that moved are found again in a folder the user names', async () => {
  const { page } = way;
  await page.getByRole('button', { name: 'Menu' }).click();
  await page.getByRole('menuitem', { name: 'Close the test' }).click();
  await page.getByText('Drop a folder of clips here').waitFor();
  await mkdir(join(way.folder, 'archive'));
  await rename(join(way.folder, 'unnamed'), join(way.folder, 'archive', 'moved'));
  await page
    .getByRole('listitem')
    .getByRole('button', { name: /^after the kill/ })
    .click();
  await page.getByText(/not where the test file says/).waitFor();
  await way.pictures('moved-clips');
  await page.getByRole('button', { name: 'Find them …' }).click();
  await way.chooseFolder('archive');
  await page.getByText(/All clips were found/).waitFor();
  expect(await page.getByText(/not where the test file says/).isVisible()).toBe(false);
});
