import type { Damping, Excitation, ResonanceModel } from './models.ts';

const NUMERATOR: Readonly<Record<Excitation, (loss: string) => string>> = {
  force: () => '1',
  'spring-end': () => '1',
  base: (loss) => `(1 + ${loss})`,
  'base-relative': () => 'r²',
  unbalance: () => 'r²',
};

const LOSS: Readonly<Record<Damping, string>> = { viscous: '2iζr', structural: 'iη' };

/** Terms that a fit may add to the model. */
export interface ExtraTerms {
  readonly rigidOffset?: boolean;
  readonly slowResidual?: boolean;
}

/**
 * The formula of a model as plain text, such as `X = G · r² / (1 − r² + 2iζr), r = f/fn`.
 * X is the complex response, G the static gain, f the drive frequency, fn the natural frequency; R is the rigid
 * offset, S the slow residual and fm the middle of the frequency range, where they are fitted.
 */
export function formulaText(model: ResonanceModel, terms: ExtraTerms = {}): string {
  const loss = LOSS[model.damping];
  const offset = terms.rigidOffset === true ? ' + R' : '';
  const slow = terms.slowResidual === true ? ' + S · (f/fm − 1)' : '';
  return `X = G · ${NUMERATOR[model.excitation](loss)} / (1 − r² + ${loss})${offset}${slow}, r = f/fn`;
}

const EXCITATION_TEXT: Readonly<Record<Excitation, string>> = {
  force: 'force on the moving mass',
  'spring-end': 'spring end moved, damper to ground',
  base: 'base moved under spring and damper, absolute motion',
  'base-relative': 'base moved under spring and damper, motion relative to the base',
  unbalance: 'rotating unbalance on the moving mass',
};

/** What a model stands for in words, such as `force on the moving mass, viscous damping`. */
export function modelText(model: ResonanceModel, terms: ExtraTerms = {}): string {
  const offset = terms.rigidOffset === true ? ', rigid offset' : '';
  const slow = terms.slowResidual === true ? ', slow residual' : '';
  return `${EXCITATION_TEXT[model.excitation]}, ${model.damping} damping${offset}${slow}`;
}

/**
 * What the static gain G of an excitation is, in words.
 * @param relative true where amplitudes are gains (response over drive), false where they are millimetres
 */
export function staticGainText(excitation: Excitation, relative: boolean): string {
  switch (excitation) {
    case 'force':
      return relative ? 'static response per unit of drive' : 'static deflection F/k in mm';
    case 'spring-end':
      return relative ? 'static response over drive' : 'static deflection in mm';
    case 'base':
    case 'base-relative':
      return relative
        ? 'response over drive that the base alone accounts for, 1 in theory'
        : 'base amplitude in mm';
    case 'unbalance':
      return relative
        ? 'response far above resonance per unit of drive'
        : 'amplitude far above resonance in mm';
  }
}
