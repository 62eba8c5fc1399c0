import { readFileSync } from 'node:fs';
import type { LeastSquaresProblem } from '../../src/numeric/least-squares-problem.ts';

/** One data set of the NIST Statistical Reference Datasets as kept in test/data, source named in the file. */
export interface NistSet {
  readonly x: number[];
  readonly y: number[];
  readonly start1: number[];
  readonly start2: number[];
  readonly certified: number[];
  readonly certified_sd: number[];
  readonly residual_sum_of_squares: number;
}

/** Reads a data set by its file name without the extension. */
export function readNist(name: string): NistSet {
  return JSON.parse(readFileSync(new URL(`../data/${name}.json`, import.meta.url), 'utf8')) as NistSet;
}

/** A model value with its derivatives by each parameter. */
type Model = (x: number, b: Float64Array) => { value: number; slopes: number[] };

const exponential = (x: number, a: number, rate: number) => {
  const e = Math.exp(-rate * x);
  return { value: a * e, slopes: [e, -a * x * e] };
};

const bump = (x: number, a: number, at: number, width: number) => {
  const z = (x - at) / width;
  const e = Math.exp(-z * z);
  return { value: a * e, slopes: [e, (2 * a * z * e) / width, (2 * a * z * z * e) / width] };
};

const wave = (x: number, c: number, s: number, period: number) => {
  const angle = (2 * Math.PI * x) / period;
  const slope = (angle / period) * (c * Math.sin(angle) - s * Math.cos(angle));
  return {
    value: c * Math.cos(angle) + s * Math.sin(angle),
    slopes: [slope, Math.cos(angle), Math.sin(angle)],
  };
};

/** The models of the data sets as NIST states them, derivatives by hand. */
export const NIST_MODELS: Readonly<Record<string, Model>> = {
  enso: (x, b) => {
    const year = wave(x, b[1]!, b[2]!, 12);
    const first = wave(x, b[4]!, b[5]!, b[3]!);
    const second = wave(x, b[7]!, b[8]!, b[6]!);
    return {
      value: b[0]! + year.value + first.value + second.value,
      slopes: [1, ...year.slopes.slice(1), ...first.slopes, ...second.slopes],
    };
  },
  eckerle4: (x, b) => {
    const z = (x - b[2]!) / b[1]!;
    const e = Math.exp(-0.5 * z * z) / b[1]!;
    return {
      value: b[0]! * e,
      slopes: [e, (b[0]! * e * (z * z - 1)) / b[1]!, (b[0]! * e * z) / b[1]!],
    };
  },
  gauss1: (x, b) => {
    const decay = exponential(x, b[0]!, b[1]!);
    const first = bump(x, b[2]!, b[3]!, b[4]!);
    const second = bump(x, b[5]!, b[6]!, b[7]!);
    return {
      value: decay.value + first.value + second.value,
      slopes: [...decay.slopes, ...first.slopes, ...second.slopes],
    };
  },
  lanczos3: (x, b) => {
    const parts = [0, 2, 4].map((k) => exponential(x, b[k]!, b[k + 1]!));
    return {
      value: parts.reduce((sum, part) => sum + part.value, 0),
      slopes: parts.flatMap((part) => part.slopes),
    };
  },
  mgh09: (x, b) => {
    const top = x * x + x * b[1]!;
    const bottom = x * x + x * b[2]! + b[3]!;
    const value = (b[0]! * top) / bottom;
    return { value, slopes: [top / bottom, (b[0]! * x) / bottom, (-value * x) / bottom, -value / bottom] };
  },
  roszman1: (x, b) => {
    const d = x - b[3]!;
    const square = Math.PI * (d * d + b[2]! * b[2]!);
    return {
      value: b[0]! - b[1]! * x - Math.atan(b[2]! / d) / Math.PI,
      slopes: [1, -x, -d / square, -b[2]! / square],
    };
  },
};

/** The least-squares problem of a data set: residual = model - observed. */
export function nistProblem(name: string, set: NistSet): LeastSquaresProblem {
  const model = NIST_MODELS[name]!;
  const columns = set.certified.length;
  return {
    parameterCount: columns,
    residualCount: set.x.length,
    residuals(p, out) {
      set.x.forEach((x, i) => {
        out[i] = model(x, p).value - set.y[i]!;
      });
    },
    jacobian(p, out) {
      set.x.forEach((x, i) => {
        out.set(model(x, p).slopes, i * columns);
      });
    },
  };
}
