import { mkdir, readFile } from 'node:fs/promises';
import { homedir } from 'node:os';
import { join } from 'node:path';
import * as z from 'zod';
import { writeWhole } from '../../src/testfile/on-disk.ts';
import type { RecentTest } from './bench-state.ts';
import { DEFAULT_PREFERENCES, type Preferences, preferencesSchema } from './preferences.ts';

const MOST_RECENT = 12;
const recentSchema = z.array(z.object({ path: z.string(), title: z.string(), openedMs: z.number() }));

/** Where the loopback host keeps preferences and recent tests, by the custom of the platform. */
export function defaultUserFolder(
  env: Readonly<Record<string, string | undefined>> = process.env,
  platform: NodeJS.Platform = process.platform,
): string {
  if (env['DWELLBOOK_HOME']) return env['DWELLBOOK_HOME'];
  if (platform === 'win32' && env['APPDATA']) return join(env['APPDATA'], 'Dwellbook');
  if (platform === 'darwin') return join(homedir(), 'Library', 'Application Support', 'Dwellbook');
  return join(env['XDG_CONFIG_HOME'] ?? join(homedir(), '.config'), 'dwellbook');
}

/** What is kept for a user between runs. Unreadable files are treated as absent; failing to write is no fault. */
export class UserFolder {
  readonly path: string;
  preferences: Preferences = DEFAULT_PREFERENCES;
  recent: readonly RecentTest[] = [];

  constructor(path: string) {
    this.path = path;
  }

  async load(): Promise<void> {
    const preferences = preferencesSchema.safeParse(await this.#read('preferences.json'));
    if (preferences.success) this.preferences = preferences.data;
    const recent = recentSchema.safeParse(await this.#read('recent.json'));
    if (recent.success) this.recent = recent.data.slice(0, MOST_RECENT);
  }

  async setPreferences(preferences: Preferences): Promise<void> {
    this.preferences = preferences;
    await this.#write('preferences.json', preferences);
  }

  async remember(test: RecentTest): Promise<void> {
    this.recent = [test, ...this.recent.filter((each) => each.path !== test.path)].slice(0, MOST_RECENT);
    await this.#write('recent.json', this.recent);
  }

  async forget(path: string): Promise<void> {
    this.recent = this.recent.filter((each) => each.path !== path);
    await this.#write('recent.json', this.recent);
  }

  async #read(name: string): Promise<unknown> {
    try {
      return JSON.parse(await readFile(join(this.path, name), 'utf8'));
    } catch {
      return undefined;
    }
  }

  async #write(name: string, value: unknown): Promise<void> {
    try {
      await mkdir(this.path, { recursive: true });
      await writeWhole(join(this.path, name), `${JSON.stringify(value, null, 2)}\n`);
    } catch {
      // a read-only home only costs the memory of preferences
    }
  }
}
