import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { cp, mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { type Browser, chromium, type Page } from 'playwright-core';
import { it } from 'vitest';

const top = join(import.meta.dirname, '..', '..');
const BROWSERS = ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome'];

/** Where the demo test lies whose clips the journeys use. */
export const DEMO_FOLDER = process.env['DWELLBOOK_DEMO'] ?? join(top, 'fixtures', 'demo');
/** Where pictures of the screens are kept. */
export const OUTPUT = join(import.meta.dirname, 'output');

/** The Chromium to drive; null where there is none. */
export const chromiumPath = process.env['CHROMIUM'] ?? BROWSERS.find((path) => existsSync(path)) ?? null;

/** A journey: skipped, visibly, where there is no Chromium, except in continuous integration, where it fails. */
export const journey = chromiumPath === null && !process.env['CI'] ? it.skip : it;

/** A bench of one's own: its host, its browser page, and a folder for its files. */
export class Journey {
  readonly page: Page;
  readonly folder: string;
  /** Errors that the page met; a journey ends with none. */
  readonly errors: string[] = [];
  /** Clicks on the picture so far. */
  clicks = 0;
  readonly #browser: Browser;
  #host: ChildProcess;

  private constructor(browser: Browser, page: Page, folder: string, host: ChildProcess) {
    this.#browser = browser;
    this.page = page;
    this.folder = folder;
    this.#host = host;
    page.on('pageerror', (error) => this.errors.push(error.stack ?? error.message));
    page.on('console', (message) => {
      if (message.type() === 'error') this.errors.push(message.text());
    });
  }

  /** Starts a host and opens its page. */
  static async start(files: readonly string[] = []): Promise<Journey> {
    if (chromiumPath === null)
      throw new Error('There is no Chromium to drive: install it, or name it in the variable CHROMIUM.');
    const folder = await mkdtemp(join(tmpdir(), 'dwellbook-journey-'));
    const { host, address } = await startHost(folder, files);
    const browser = await chromium.launch({
      executablePath: chromiumPath,
      args: ['--no-sandbox', '--disable-gpu', '--no-first-run', '--disable-background-networking'],
    });
    const page = await browser.newPage({ viewport: { width: 1280, height: 800 } });
    page.setDefaultTimeout(30_000);
    const made = new Journey(browser, page, folder, host);
    await page.goto(address);
    await page.waitForSelector('.start, .run-sheet');
    return made;
  }

  /** Ends the host at once, as a power cut would. */
  kill(): void {
    this.#host.kill('SIGKILL');
  }

  /** Starts the host again after a kill and opens its page. */
  async startAgain(files: readonly string[] = []): Promise<void> {
    const { host, address } = await startHost(this.folder, files);
    this.#host = host;
    this.errors.length = 0; // the page lost its host in between, and said so
    await this.page.goto(address);
    await this.page.waitForSelector('.start, .run-sheet');
  }

  /** Ends the browser and the host, and takes the folder away. */
  async end(): Promise<void> {
    const gone = new Promise((resolve) => this.#host.once('exit', resolve));
    await this.#browser.close();
    if (this.#host.exitCode === null && this.#host.signalCode === null) {
      this.#host.kill('SIGTERM');
      await gone;
    }
    await rm(this.folder, { recursive: true, force: true });
  }

  /** Copies the demo's clips whose names pass into a folder of the journey; gives its path. */
  async clips(name: string, passes: (file: string) => boolean): Promise<string> {
    const into = join(this.folder, name);
    await cp(join(DEMO_FOLDER, 'clips'), into, {
      recursive: true,
      filter: (source) => !source.endsWith('.mp4') || passes(source),
    });
    return into;
  }

  /** Goes from the page's chooser through folders below the journey's folder and chooses the last one. */
  async chooseFolder(...folders: string[]): Promise<void> {
    const { page } = this;
    const root = this.folder.split('/').at(-1) ?? '';
    await page.getByRole('dialog').getByRole('button', { name: root, exact: true }).click();
    for (const each of folders) {
      await page.getByRole('option', { name: `folder ${each}`, exact: true }).click();
      await page.getByText(new RegExp(`/${each}$`)).waitFor();
    }
    await page.getByRole('button', { name: 'Choose this folder' }).click();
  }

  /** A click on the picture, shown whole, at a point of the frame, px as displayed. */
  async clickPicture([x, y]: readonly [number, number]): Promise<void> {
    const stage = this.page.locator('[data-picture]');
    const [width, height] = (await stage.getAttribute('data-picture'))?.split('x').map(Number) ?? [];
    const box = await stage.boundingBox();
    if (!box || width === undefined || height === undefined) throw new Error('the picture is not shown');
    const zoom = Math.min(box.width / width, box.height / height);
    const left = box.x + (box.width - width * zoom) / 2 + zoom / 2;
    const above = box.y + (box.height - height * zoom) / 2 + zoom / 2;
    this.clicks++;
    await this.page.mouse.click(left + x * zoom, above + y * zoom);
  }

  /** Measures what is not measured, and waits for the end. */
  async measureRest(): Promise<void> {
    const { page } = this;
    await page.getByRole('button', { name: /^Measure the (rest|clip)/ }).click();
    await page.getByRole('button', { name: 'Measure again' }).waitFor({ timeout: 600_000 });
  }

  /** Keeps pictures of the screen: 1280 x 800 and 1920 x 1080, light and dark. */
  async pictures(name: string): Promise<void> {
    const { page } = this;
    for (const [width, height] of [
      [1280, 800],
      [1920, 1080],
    ] as const) {
      await page.setViewportSize({ width, height });
      for (const theme of ['light', 'dark'] as const) {
        await page.emulateMedia({ colorScheme: theme });
        // two frames of the screen later everything is drawn
        await page.evaluate('new Promise((r) => requestAnimationFrame(() => requestAnimationFrame(r)))');
        await page.screenshot({ path: join(OUTPUT, `${name}-${width}-${theme}.png`) });
      }
    }
    await page.emulateMedia({ colorScheme: 'light' });
    await page.setViewportSize({ width: 1280, height: 800 });
  }
}

async function startHost(
  folder: string,
  files: readonly string[],
): Promise<{ host: ChildProcess; address: string }> {
  const script = join(top, 'dist', 'start.js');
  const host = spawn(process.execPath, [script, '--loopback', '--no-open', ...files], {
    cwd: folder,
    env: { ...process.env, DWELLBOOK_HOME: join(folder, '.home'), DWELLBOOK_TESTS: join(folder, 'tests') },
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  const address = await new Promise<string>((resolve, reject) => {
    let text = '';
    host.stdout?.on('data', (chunk: Buffer) => {
      text += chunk.toString('utf8');
      const found = /http:\/\/127\.0\.0\.1:\d+\/open\?token=\S+/.exec(text);
      if (found) resolve(found[0]);
    });
    host.once('exit', (code) => reject(new Error(`the host ended with ${code}: ${text}`)));
  });
  return { host, address };
}
