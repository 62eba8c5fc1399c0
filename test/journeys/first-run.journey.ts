import { afterAll, beforeAll, expect } from 'vitest';
import { seriousFindings } from './accessibility.ts';
import { demoTruth } from './demo-test.ts';
import { chromiumPath, Journey, journey } from './journey.ts';
import { shownQuantity } from './read-page.ts';

let way: Journey;
beforeAll(async () => {
  if (chromiumPath !== null) way = await Journey.start();
});
afterAll(() => way?.end());

journey('first run: the empty bench says what to do', async () => {
  const { page } = way;
  await page.getByText('Drop a folder of clips here to start a test').waitFor();
  await way.pictures('start');
  expect(await seriousFindings(page)).toEqual([]);
});

journey('first run to the demo result, which is that of the rig the clips were drawn from', async () => {
  const { page } = way;
  await page.getByRole('button', { name: 'Open the demo test' }).click();
  await page.getByRole('grid', { name: 'Dwells' }).waitFor();
  await way.measureRest();
  await way.pictures('measure');
  expect(await seriousFindings(page)).toEqual([]);
  await page.getByRole('link', { name: 'Resonance' }).click();
  await way.pictures('resonance');
  expect(await seriousFindings(page)).toEqual([]);
  const truth = demoTruth(0);
  const natural = await shownQuantity(page, 'natural frequency');
  const damping = await shownQuantity(page, 'damping ratio');
  // 0.1 % of the frequency and 2 % of the damping: what a reader of the result would call the same
  expect(Math.abs(natural.value / truth.naturalHz - 1)).toBeLessThan(0.001);
  expect(Math.abs(damping.value / truth.dampingRatio - 1)).toBeLessThan(0.02);
});

journey('peak to peak relabels everything and doubles the amplitudes', async () => {
  const { page } = way;
  const cell = page.getByRole('row').nth(1).getByRole('gridcell').nth(1);
  const peak = Number.parseFloat((await cell.textContent()) ?? '');
  await page.getByRole('combobox', { name: 'Amplitudes as' }).selectOption('peak-to-peak');
  await page.getByRole('columnheader', { name: 'amplitude mm, p-p' }).waitFor();
  expect(Number.parseFloat((await cell.textContent()) ?? '') / peak).toBeCloseTo(2, 2);
  await page.getByRole('combobox', { name: 'Amplitudes as' }).selectOption('peak');
});

journey('every plot is saved as picture and as data', async () => {
  const { page } = way;
  for (const [kind, name] of [
    ['CSV', 'Save the data of Amplitude as CSV'],
    ['PNG', 'Save Amplitude as PNG'],
  ] as const) {
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('button', { name }).click(),
    ]);
    expect(download.suggestedFilename()).toMatch(new RegExp(`amplitude\\.${kind.toLowerCase()}$`));
  }
});

journey('the page met no error on the way', () => {
  expect(way.errors).toEqual([]);
});
