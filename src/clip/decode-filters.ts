import type { ClipInfo } from './clip-info.ts';
import { lumaAccess } from './pixel-format.ts';
import type { Region } from './region.ts';

/** What of a clip decides how its brightness is reached. */
export type Picture = Pick<ClipInfo, 'pixelFormat' | 'codedWidth' | 'codedHeight'>;

/**
 * Filter chain that cuts equal regions out of the stored picture and stacks their brightness top to bottom, so that
 * one stream with one timestamp a frame carries them all. Each region must have passed `fitRegion`.
 */
export function stackedLumaFilters(picture: Picture, regions: readonly Region[]): string[] {
  const { filters, beforeCrop } = lumaAccess(picture.pixelFormat);
  const branch = (region: Region): string[] => {
    const cut = isWhole(region, picture) ? [] : [cropFilter(region)];
    return beforeCrop ? cut : [...cut, ...filters];
  };
  const head = beforeCrop ? filters : [];
  const [only] = regions;
  if (only === undefined) throw new Error('At least one region is needed to decode.');
  if (regions.length === 1) return [...head, ...branch(only)];

  const names = regions.map((_, i) => ({ whole: `[w${i}]`, cut: `[c${i}]` }));
  const split = `split=${regions.length}${names.map((n) => n.whole).join('')}`;
  const branches = regions.map(
    (region, i) => `${names[i]?.whole}${branch(region).join(',') || 'null'}${names[i]?.cut}`,
  );
  const stack = `${names.map((n) => n.cut).join('')}vstack=inputs=${regions.length}`;
  return [[[...head, split].join(','), ...branches, stack].join(';')];
}

function isWhole(region: Region, picture: Picture): boolean {
  return region.width === picture.codedWidth && region.height === picture.codedHeight;
}

function cropFilter({ x, y, width, height }: Region): string {
  return `crop=${width}:${height}:${x}:${y}`;
}
