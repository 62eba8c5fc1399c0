import type { Verdict } from './dwell-judgement.ts';
import type { JointFit } from './joint-fit.ts';
import type { Finding } from './judge-window.ts';
import { seconds } from './record-checks.ts';

/** A fraction as a percentage with two significant digits: "6.2 %". */
export function percent(fraction: number): string {
  return `${Number((100 * fraction).toPrecision(2))} %`;
}

/** A length in mm with as many digits as its uncertainty allows: "12.34 mm". */
export function millimetres(valueMm: number, uMm: number): string {
  const digits = uMm > 0 ? Math.min(6, Math.max(0, 1 - Math.floor(Math.log10(uMm)))) : 3;
  return `${valueMm.toFixed(digits)} mm`;
}

/** A frequency in Hz with six significant digits, trailing zeros dropped: "5.2 Hz". */
export function hertz(frequencyHz: number): string {
  return `${Number(frequencyHz.toPrecision(6))} Hz`;
}

/** The verdict that belongs to a finding. */
export function verdictOf(finding: Finding): Verdict {
  switch (finding.kind) {
    case 'steady':
      return 'steady';
    case 'transient':
      return finding.beatS === null ? 'settling' : 'beating';
    case 'beat':
      return 'beating';
    default:
      return 'drifting';
  }
}

/** What to do about it, in words for the bench. */
export function sentenceOf(
  finding: Finding,
  windowS: readonly [number, number],
  frequencyHz: number,
  joint: JointFit | null,
): string {
  const span = windowS[1] - windowS[0];
  switch (finding.kind) {
    case 'steady':
      return `Steady from ${seconds(windowS[0])} to ${seconds(windowS[1])}, ${Math.round(span * frequencyHz)} periods.`;
    case 'transient': {
      const swelling =
        finding.beatS === null ? '' : `, and makes the swing swell every ${seconds(finding.beatS)}`;
      return (
        `The start-up transient is still ${percent(finding.atEnd)} of the amplitude at the end of the clip${swelling}: ` +
        `wait ${seconds(finding.waitS)} longer and film again${useJoint(joint)}.`
      );
    }
    case 'beat': {
      const every = finding.beatS === null ? '' : ` every ${seconds(finding.beatS)}`;
      return (
        `The swing swells and shrinks by ${percent(finding.swing)}${every} and does not die away: ` +
        'look for a second source near the drive frequency, or wait and film again.'
      );
    }
    case 'trend': {
      const way = finding.change > 0 ? 'grew' : 'fell';
      return (
        `The amplitude ${way} by ${percent(Math.abs(finding.change))} in ${seconds(span)} and has not levelled off: ` +
        'wait and film again; if it goes on, check that the drive holds its level.'
      );
    }
    case 'slide':
      return (
        `The phase slid by ${Number(finding.degrees.toPrecision(2))} degrees in ${seconds(span)}: the motion has not ` +
        `settled, or the drive runs at ${hertz(finding.measuredHz)}; film longer to tell.`
      );
    case 'wander':
      return (
        `The swing changes by ${percent(finding.excursion)} within the clip and no part of it is steady: ` +
        'film again, or give a window that leaves the disturbance out.'
      );
  }
}

function useJoint(joint: JointFit | null): string {
  if (joint === null || !joint.conditioned) return '';
  return `, or use the joint fit: steady amplitude ${millimetres(joint.amplitude, joint.amplitudeU)}`;
}
