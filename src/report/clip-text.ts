import type { ClipInfo } from '../clip/clip-info.ts';
import { significant } from './format-number.ts';
import { wrapped } from './text-table.ts';

const SHOWN_TIMES = 5;

function rate(value: number | null): string {
  return value === null ? 'not known' : `${significant(value, 5)} frames/s`;
}

/** What a clip is, for a person, one fact a line. */
export function clipText(info: ClipInfo): string {
  const shape =
    info.codedWidth === info.displayedWidth && info.codedHeight === info.displayedHeight
      ? ''
      : `, stored as ${info.codedWidth} x ${info.codedHeight}`;
  const facts: [string, string][] = [
    ['codec', `${info.codec}, ${info.pixelFormat}, ${info.bitDepth} bit (${info.container})`],
    ['displayed size', `${info.displayedWidth} x ${info.displayedHeight} px${shape}`],
    ['rotation', `${info.rotationDeg} degrees`],
    ['pixel aspect', significant(info.pixelAspect, 5)],
    ['frames', `${info.frameCount} in ${significant(info.durationS, 5)} s`],
    ['frame rate', `measured ${rate(info.measuredFps)}, declared ${rate(info.nominalFps)}`],
    ['capture rate', info.captureFps === null ? 'not stated in the file' : rate(info.captureFps)],
    [
      'frame times',
      `${[...info.timesS.slice(0, SHOWN_TIMES)].map((time) => time.toFixed(4)).join(', ')}${info.frameCount > SHOWN_TIMES ? ', ...' : ''} s`,
    ],
    [
      'gaps',
      info.gaps.length === 0
        ? 'none'
        : info.gaps.map((gap) => `${gap.missingFrames} frames after frame ${gap.afterFrame}`).join('; '),
    ],
    ['duplicates', info.duplicates.length === 0 ? 'none' : `frames ${info.duplicates.join(', ')}`],
    ['timing', info.regularity.variable ? 'variable frame rate; each frame counts at its own time' : 'even'],
  ];
  const warnings = info.warnings.flatMap((sentence) =>
    wrapped(sentence, 76).map((line, k) => `${k === 0 ? '  - ' : '    '}${line}\n`),
  );
  return (
    facts.map(([name, value]) => `${name.padEnd(16)}${value}\n`).join('') +
    (warnings.length > 0 ? `warnings\n${warnings.join('')}` : '')
  );
}

/** What a clip is, for programs: every fact, with all frame times. */
export function clipFactsJson(info: ClipInfo): Record<string, unknown> {
  const { path: _path, keyFrames, timesS, ticks: _ticks, ...rest } = info;
  return {
    format: 'dwellbook-clip',
    version: 1,
    ...rest,
    timesS: [...timesS],
    keyFrames: [...keyFrames.entries()].filter(([, key]) => key === 1).map(([index]) => index),
  };
}
