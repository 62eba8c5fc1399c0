/** One dwell in a response plot, in the units of the plot. */
export interface ResponseDwell {
  readonly name: string;
  readonly driveHz: number;
  readonly amplitude: number;
  /** Half-length of its error bar; null where the uncertainty is not known. */
  readonly amplitudeBar: number | null;
  readonly lagDeg: number | null;
  readonly lagBarDeg: number | null;
  /** Shown, not fitted. */
  readonly excluded: boolean;
}

/** The fitted curve; arrays are as long as `driveHz`, null where the fit does not give them. */
export interface ResponseCurve {
  readonly driveHz: Float64Array;
  readonly amplitude: Float64Array | null;
  /** Half-width of the band about the curve. */
  readonly amplitudeBar: Float64Array | null;
  readonly lagDeg: Float64Array;
  readonly lagBarDeg: Float64Array | null;
}

/** Half-power points of the fitted curve. */
export interface HalfPowerMarks {
  readonly lowerHz: number;
  readonly upperHz: number;
  /** Amplitude there: that of the peak over the square root of 2. */
  readonly amplitude: number;
}

/** What the response plots of one configuration are drawn from. */
export interface ResponseData {
  /** Axis title with unit, such as `amplitude, mm (zero to peak)`. */
  readonly amplitudeTitle: string;
  readonly dwells: readonly ResponseDwell[];
  /** null where there is no fit. */
  readonly curve: ResponseCurve | null;
  readonly naturalHz: number | null;
  readonly halfPower: HalfPowerMarks | null;
}
