import { afterAll, beforeAll, expect } from 'vitest';
import { demoPoints, demoTruth } from './demo-test.ts';
import { chromiumPath, Journey, journey } from './journey.ts';
import { runSheetTexts, shownQuantity } from './read-page.ts';

let way: Journey;
beforeAll(async () => {
  if (chromiumPath !== null) way = await Journey.start();
});
afterAll(() => way?.end());

/** Selects the response marker in the list of points. */
async function selectResponse(): Promise<void> {
  const point = way.page.getByRole('button', { name: /^Response/ });
  if ((await point.getAttribute('aria-pressed')) !== 'true') await point.click();
}

const firstConfiguration = (path: string): boolean => path.includes('gap3_');

journey(
  'from a folder of clips to the resonance with three clicks on the picture and one typed length',
  async () => {
    const { page } = way;
    const points = demoPoints();
    await way.clips('rig', firstConfiguration);
    await page.getByRole('button', { name: 'Choose a folder of clips' }).click();
    await way.chooseFolder('rig');
    await page.getByText('Click the first scale point').waitFor();
    const frequencies = (await runSheetTexts(page)).map(([hz]) => Number(hz));
    expect(frequencies.length).toBeGreaterThan(4);
    expect(frequencies).toEqual(frequencies.toSorted((a, b) => a - b));

    await way.clickPicture(points.scaleFrom);
    await page.getByText('Click the second scale point').waitFor();
    await way.clickPicture(points.scaleTo);
    await page
      .getByLabel('Type the true distance between A and B, mm')
      .fill(String(points.length).replace('.', ','));
    await page.keyboard.press('Enter');
    await page.getByText('Click a mark on the moving part').waitFor();
    await way.pictures('setup');
    await way.clickPicture(points.response);
    await page.getByText(/Tracks to about [\d.]+ px/).waitFor();
    expect(way.clicks).toBe(3);
    await way.measureRest();

    await page.getByRole('link', { name: 'Resonance' }).click();
    const truth = demoTruth(0);
    const natural = await shownQuantity(page, 'natural frequency');
    expect(Math.abs(natural.value / truth.naturalHz - 1)).toBeLessThan(0.001);
  },
);

journey('a dwell is excluded with a reason, shown and not fitted; undo takes it in again', async () => {
  const { page } = way;
  const points = page.getByText(/ dwells$/);
  const before = await points.textContent();
  await page.getByRole('grid').getByRole('gridcell').first().click();
  await page.getByRole('button', { name: 'Exclude …' }).click();
  await page.getByLabel('Why it is left out of the fit').fill('bumped the bench');
  await page.keyboard.press('Enter');
  await page.getByRole('gridcell', { name: 'excluded: bumped the bench' }).waitFor();
  await page.getByRole('heading', { name: 'Excluded' }).waitFor();
  await expect.poll(() => points.textContent()).not.toBe(before);
  await page.keyboard.press('Control+z');
  await expect.poll(() => points.textContent()).toBe(before);
});

journey('a marker on a spot without texture is refused at once, and another spot is taken', async () => {
  const { page } = way;
  const points = demoPoints();
  await page.getByRole('link', { name: 'Measure' }).click();
  await selectResponse();
  await page.getByRole('button', { name: 'Place anew' }).click();
  await way.clickPicture([3, 3]);
  await page.getByText(/too near the edge|too little texture|one direction only/).waitFor();
  await page.getByText('not measured').first().waitFor();
  await way.pictures('refused-spot');
  await page.getByRole('button', { name: 'Place anew' }).click();
  // another spot of the part: what was measured with the first no longer holds
  await way.clickPicture([points.response[0] + 3, points.response[1] + 2]);
  await page.getByText(/Tracks to about/).waitFor();
});

journey('cancel in the middle keeps what is done and leaves the rest to be measured', async () => {
  const { page } = way;
  await page.getByRole('button', { name: /^Measure the rest/ }).click();
  await page.getByText(/clip 2 of/).waitFor();
  await page.getByRole('button', { name: 'Cancel' }).click();
  await page.getByRole('button', { name: /^Measure the (rest|clip)/ }).waitFor();
  const verdicts = (await runSheetTexts(page)).map((row) => row.at(-1));
  expect(verdicts[0]).not.toBe('not measured');
  expect(verdicts.at(-1)).toBe('not measured');
});

journey('the arrow keys move a point by a tenth of a pixel, with Shift by one', async () => {
  const { page } = way;
  await selectResponse();
  const x = async (): Promise<number> =>
    Number(/x ([\d.]+) px/.exec((await page.locator('.loupe p').textContent()) ?? '')?.[1]);
  const before = await x();
  await page.getByRole('application').focus();
  await page.keyboard.press('ArrowRight');
  await expect.poll(async () => (await x()) - before).toBeCloseTo(0.1, 6);
  await page.keyboard.press('Shift+ArrowLeft');
  await expect.poll(async () => (await x()) - before).toBeCloseTo(-0.9, 6);
});

journey('the page met no error on the way', () => {
  expect(way.errors).toEqual([]);
});
