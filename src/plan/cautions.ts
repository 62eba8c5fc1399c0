/** What in a plan or test calls for a caution. */
export type CautionSituation =
  /** Anything is shaken at all. */
  | 'always'
  /** A step leads up the flank of the resonance. */
  | 'toward-peak'
  /** Masses are added to or taken off the moving part. */
  | 'added-masses'
  /** The damper or exciter holds strong magnets. */
  | 'magnets'
  /** No travel limit is stated. */
  | 'no-travel-limit'
  /** A step would pass, or on the way nearly passes, the travel limit. */
  | 'near-travel-limit';

/** A safety caution with the situation that calls for it. */
export interface Caution {
  readonly id: string;
  readonly situation: CautionSituation;
  readonly text: string;
}

/** All cautions, in the order in which they are printed. */
export const CAUTIONS: readonly Caution[] = [
  {
    id: 'peak',
    situation: 'toward-peak',
    text: 'From here the swing grows with every step and can break the part or throw something off. Go up in small steps, watch the first seconds of each, and keep a hand on the drive switch.',
  },
  {
    id: 'clear',
    situation: 'always',
    text: 'Keep hands, hair, sleeves and cables clear of everything that moves, and switch the drive off before reaching in.',
  },
  {
    id: 'guard',
    situation: 'always',
    text: 'Put a guard around the exciter, clamp rig and tripod to something that does not walk, and let nobody stand in line with the motion.',
  },
  {
    id: 'limit',
    situation: 'near-travel-limit',
    text: 'Do not pass the travel limit: lower the drive instead of hoping that the prediction is too high.',
  },
  {
    id: 'no-limit',
    situation: 'no-travel-limit',
    text: 'No travel limit is stated. Measure how far the part can swing before it meets anything, and enter it, before going toward the peak.',
  },
  {
    id: 'masses',
    situation: 'added-masses',
    text: 'Screw or clamp added masses down so that they cannot come loose; tape and putty let go at resonance.',
  },
  {
    id: 'magnets',
    situation: 'magnets',
    text: 'Strong magnets pinch fingers and disturb pacemakers, implants, bank cards and watches: keep both well apart.',
  },
  {
    id: 'strike',
    situation: 'toward-peak',
    text: 'Stop at once if parts strike, rattle or leave their seat, and look for damage before going on.',
  },
  {
    id: 'eyes',
    situation: 'toward-peak',
    text: 'Wear eye protection: a spring or a screw that lets go flies.',
  },
  {
    id: 'rules',
    situation: 'always',
    text: 'Follow the rules of your site. Where people could be hurt, have a qualified person judge the set-up first; these hints do not replace that.',
  },
];

/** The cautions that the situations call for, in printing order; those for any test are always among them. */
export function cautionsFor(situations: Iterable<CautionSituation>): Caution[] {
  const present = new Set<CautionSituation>(['always', ...situations]);
  return CAUTIONS.filter((caution) => present.has(caution.situation));
}
