import { readFileSync } from 'node:fs';
import { mkdir } from 'node:fs/promises';
import { dirname } from 'node:path';
import * as z from 'zod';
import { writeWhole } from '../../src/testfile/on-disk.ts';

const placeSchema = z.object({
  width: z.int().min(400).max(20_000),
  height: z.int().min(300).max(20_000),
  x: z.int().optional(),
  y: z.int().optional(),
  maximized: z.boolean().default(false),
});

/** Where the window was, px of the screen. */
export type WindowPlace = z.infer<typeof placeSchema>;

/** A rectangle of the screen, px. */
export interface ScreenArea {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

const FIRST_PLACE: WindowPlace = { width: 1440, height: 900, maximized: false };

/** Where the window was when it was last closed; a sensible place where that is not known. */
export function readWindowPlace(path: string): WindowPlace {
  try {
    return placeSchema.parse(JSON.parse(readFileSync(path, 'utf8')));
  } catch {
    return FIRST_PLACE;
  }
}

/** Keeps the place for the next start; failing to is no fault. */
export async function keepWindowPlace(path: string, place: WindowPlace): Promise<void> {
  try {
    await mkdir(dirname(path), { recursive: true });
    await writeWhole(path, JSON.stringify(placeSchema.parse(place)));
  } catch {
    // the window opens at its first place the next time
  }
}

/** The place with its position left out where no screen shows enough of it (a screen was taken away). */
export function onSomeScreen(place: WindowPlace, areas: readonly ScreenArea[]): WindowPlace {
  const { x, y, ...size } = place;
  if (x === undefined || y === undefined) return size;
  const shown = areas.some((area) => {
    const across = Math.min(x + place.width, area.x + area.width) - Math.max(x, area.x);
    const down = Math.min(y + place.height, area.y + area.height) - Math.max(y, area.y);
    return across >= 200 && down >= 100 && y >= area.y - 10;
  });
  return shown ? place : size;
}
