import { spawnSync } from 'node:child_process';
import { mkdir, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { afterAll, beforeAll, expect } from 'vitest';
import { chromiumPath, Journey, journey, OUTPUT } from './journey.ts';

// Figures, not limits: a shared machine is no judge. They are printed and kept in output/speed.json.

let way: Journey;
const figures: Record<string, number> = {};
beforeAll(async () => {
  if (chromiumPath !== null) way = await Journey.start();
});
afterAll(async () => {
  if (!way) return;
  console.log(JSON.stringify(figures, null, 2));
  await writeFile(join(OUTPUT, 'speed.json'), `${JSON.stringify(figures, null, 2)}\n`);
  await way.end();
});

const median = (values: number[]): number =>
  values.toSorted((a, b) => a - b)[values.length >> 1] ?? Number.NaN;

journey('from the address to a page that can be used', async () => {
  const started = performance.now();
  await way.page.reload();
  await way.page.getByRole('button', { name: 'Open the demo test' }).waitFor();
  figures['page usable, ms'] = Math.round(performance.now() - started);
  expect(figures['page usable, ms']).toBeGreaterThan(0);
});

journey('stepping and scrubbing through a clip of 1920 x 1080', async () => {
  const { page } = way;
  const folder = join(way.folder, 'hd');
  await mkdir(folder);
  const clip = join(folder, '2Hz.mp4');
  const source = 'testsrc2=size=1920x1080:rate=60:duration=10';
  const made = spawnSync('ffmpeg', [
    ...['-v', 'error', '-f', 'lavfi', '-i', source, '-c:v', 'libx264', '-preset', 'veryfast'],
    ...['-g', '60', '-pix_fmt', 'yuv420p', clip],
  ]);
  expect(made.status, String(made.stderr)).toBe(0);
  await page.getByRole('button', { name: 'Choose a folder of clips' }).click();
  await way.chooseFolder('hd');
  await page.locator('[data-picture]').waitFor();
  await page.getByRole('button', { name: 'Not now' }).click();

  await page.evaluate('window.frameLatenciesMs.length = 0');
  for (let step = 0; step < 40; step++) {
    const before = await page.evaluate<number>('window.frameLatenciesMs.length');
    await page.getByRole('button', { name: 'One frame on' }).click();
    await expect
      .poll(() => page.evaluate<number>('window.frameLatenciesMs.length'), { interval: 5 })
      .toBeGreaterThan(before);
  }
  const steps = await page.evaluate<number[]>('window.frameLatenciesMs.slice()');
  figures['frame step, median ms'] = Math.round(median(steps));
  figures['frame step, longest ms'] = Math.round(Math.max(...steps));

  // one scrub through the clip in 5 s and one back: pictures drawn a second
  const scrub = (): Promise<number> =>
    page.evaluate<number>(`new Promise((resolve) => {
      const slider = document.querySelector('input[aria-label="Frame"]');
      const last = Number(slider.max);
      const start = performance.now();
      window.frameLatenciesMs.length = 0;
      const move = () => {
        const way = (performance.now() - start) / 5000;
        if (way >= 1) return resolve(window.frameLatenciesMs.length / 5);
        slider.value = String(Math.round(last * way));
        slider.dispatchEvent(new Event('input', { bubbles: true }));
        requestAnimationFrame(move);
      };
      move();
    })`);
  figures['first scrub, pictures/s'] = Math.round(await scrub());
  figures['second scrub, pictures/s'] = Math.round(await scrub());
  expect(steps.length).toBeGreaterThanOrEqual(40);
});

journey('long tasks of the page while a clip is tracked', async () => {
  const { page } = way;
  await page.evaluate(`{
    window.longTasksMs = [];
    new PerformanceObserver((list) => {
      for (const each of list.getEntries()) window.longTasksMs.push(each.duration);
    }).observe({ entryTypes: ['longtask'] });
  }`);
  await page.getByRole('button', { name: 'Place scale point A' }).click();
  await way.clickPicture([200, 900]);
  await page.getByRole('button', { name: 'Place scale point B' }).click();
  await way.clickPicture([1200, 900]);
  await page.getByLabel('Type the true distance between A and B, mm').fill('100');
  await page.keyboard.press('Enter');
  await page.getByRole('button', { name: 'Place response' }).click();
  await way.clickPicture([960, 300]);
  await page
    .getByText(/Tracks to about|cannot|too little|one direction|clipped/)
    .first()
    .waitFor();
  await way.measureRest();
  const tasks = await page.evaluate<number[]>('window.longTasksMs');
  figures['tasks over 100 ms while tracking'] = tasks.filter((each) => each > 100).length;
  figures['longest task while tracking, ms'] = Math.round(Math.max(0, ...tasks));
  expect(way.errors).toEqual([]);
});
