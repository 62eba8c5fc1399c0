import { type Measured, measured } from '../numeric/measured.ts';

/** Unit in which a report shows lengths. Measurement, files and results stay in mm. */
export interface LengthUnit {
  readonly name: 'mm' | 'in';
  /** What a length in mm is multiplied by. */
  readonly perMm: number;
}

const MM_PER_INCH = 25.4; // exact since 1959

/** Millimetres, or inches where asked for. */
export function lengthUnit(inches: boolean): LengthUnit {
  return inches ? { name: 'in', perMm: 1 / MM_PER_INCH } : { name: 'mm', perMm: 1 };
}

/** A length in mm in the unit shown; null stays null. */
export function inUnit(lengthMm: number | null, unit: LengthUnit): number | null {
  return lengthMm === null ? null : lengthMm * unit.perMm;
}

/** A measured length in mm in the unit shown. */
export function measuredInUnit(lengthMm: Measured, unit: LengthUnit): Measured {
  return measured(inUnit(lengthMm.value, unit), inUnit(lengthMm.u, unit));
}
