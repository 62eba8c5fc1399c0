import type { Plot } from '../charts/chart.ts';
import { parseNumber } from '../format/numbers.ts';

/** A cell of a CSV file: quoted where needed, and never read as a formula by a spreadsheet. */
export function csvCell(text: string): string {
  const safe = /^[=+\-@\t\r]/.test(text) && parseNumber(text) === null ? `'${text}` : text;
  return /[",\n\r]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/** The data of a plot as CSV: one line a point. */
export function plotAsCsv(plot: Plot): string {
  const lines = [['series', 'name', plot.xTitle, plot.yTitle, 'standard uncertainty']];
  for (const { label, points } of plot.series)
    for (const { x, y, u, name } of points)
      lines.push([label, name ?? '', String(x), String(y), u == null ? '' : String(u)]);
  return `${lines.map((line) => line.map(csvCell).join(',')).join('\r\n')}\r\n`;
}

/** Lets the user save some content under a name. */
export function saveFile(name: string, content: Blob): void {
  const link = document.createElement('a');
  link.href = URL.createObjectURL(content);
  link.download = name;
  link.click();
  setTimeout(() => URL.revokeObjectURL(link.href), 10_000); // the download has begun by then
}

/** Saves what a canvas shows as PNG, on the page's own ground. */
export function savePng(name: string, canvas: HTMLCanvasElement): void {
  const copy = document.createElement('canvas');
  copy.width = canvas.width;
  copy.height = canvas.height;
  const context = copy.getContext('2d');
  if (!context) return;
  context.fillStyle = getComputedStyle(document.documentElement).getPropertyValue('--sheet');
  context.fillRect(0, 0, copy.width, copy.height);
  context.drawImage(canvas, 0, 0);
  copy.toBlob((blob) => blob && saveFile(name, blob), 'image/png');
}
