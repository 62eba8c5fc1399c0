import { resolve } from 'node:path';
import { expect, test } from 'vitest';
import { ffmpegArguments } from '../../src/clip/ffmpeg-arguments.ts';

const pass = { container: 'mov' as const, outputOptions: ['-f', 'null'] };

test('input options, demuxer, input, map, filters and output come in the order ffmpeg asks for', () => {
  const args = ffmpegArguments({
    ...pass,
    path: '/c/a.mp4',
    inputOptions: ['-ss', '1'],
    filters: ['hflip', 'vflip'],
  });
  expect(args.slice(args.indexOf('-ss'))).toEqual([
    ...['-ss', '1', '-f', 'mov', '-i', 'file:/c/a.mp4'],
    ...['-filter:v', 'hflip,vflip', '-map', '0:V:0', '-f', 'null', 'pipe:1'],
  ]);
});

test('ffmpeg neither reads the keyboard nor opens anything but files and pipes, nor what a movie refers to', () => {
  const args = ffmpegArguments({ ...pass, path: '/c/a.mp4' });
  const before = args.slice(0, args.indexOf('-i')).join(' ');
  expect(before).toContain('-nostdin');
  expect(before).toContain('-protocol_whitelist file,pipe');
  expect(before).toContain('-enable_drefs 0 -use_absolute_path 0');
});

test.each([
  '-y.mp4',
  'a:b.mp4',
  'http://x/y.mp4',
  'o\'clock "now" $HOME.mp4',
  '100%d.mp4',
  'Größe 測定.mp4',
  'a\nb.mp4',
])('the name %j stays one argument, as an absolute address of a file', (name) => {
  const args = ffmpegArguments({ ...pass, path: name });
  expect(args[args.indexOf('-i') + 1]).toBe(`file:${resolve(name)}`);
});
