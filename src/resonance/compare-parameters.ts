import { type ComparedValue, type Difference, differenceOf, holmAdjusted } from './compare-differences.ts';

/** One configuration with the parameters found for it, by key such as `naturalHz`. */
export interface ParameterSet {
  readonly id: string;
  readonly label: string;
  readonly parameters: Readonly<Record<string, ComparedValue>>;
}

/** A parameter to compare: its key in the sets, its name and unit for the table. */
export interface ParameterColumn {
  readonly key: string;
  readonly name: string;
  readonly unit: string;
}

/** A difference between two configurations with its verdict. */
export interface ComparedPair extends Difference {
  readonly from: string;
  readonly to: string;
  /** Chance corrected for the number of comparisons made of this parameter (Holm); null where it cannot be told. */
  readonly pAdjusted: number | null;
  /** True where `pAdjusted` is below 0.05; null where it cannot be told. */
  readonly significant: boolean | null;
  /** One sentence for the reader; where nothing can be told, what is missing. */
  readonly sentence: string;
}

/** One parameter over all configurations. `values` stands in the order of the configurations. */
export interface ComparedParameter {
  readonly key: string;
  readonly name: string;
  readonly unit: string;
  readonly values: readonly ComparedValue[];
  readonly pairs: readonly ComparedPair[];
}

/** The table of configurations side by side. */
export interface ParameterComparison {
  readonly configurations: readonly { readonly id: string; readonly label: string }[];
  readonly parameters: readonly ComparedParameter[];
  readonly notes: readonly string[];
}

/** `against` the id of the configuration all others are compared with; left out: every pair is compared. */
export interface ParameterComparisonOptions {
  readonly against?: string;
}

const SIGNIFICANCE = 0.05;
const NOTHING: ComparedValue = { value: null, u: null };

/**
 * Compares parameters across configurations: differences and ratios with uncertainties in which common errors
 * cancel, and whether each difference is more than the independent uncertainties explain.
 *
 * @throws Error where `against` names no configuration
 */
export function compareParameters(
  sets: readonly ParameterSet[],
  columns: readonly ParameterColumn[],
  options: ParameterComparisonOptions = {},
): ParameterComparison {
  const pairs = pairsOf(sets, options.against);
  const parameters = columns.map(({ key, name, unit }): ComparedParameter => {
    const valueIn = (set: ParameterSet) => set.parameters[key] ?? NOTHING;
    const differences = pairs.map(([from, to]) => differenceOf(valueIn(from), valueIn(to)));
    const adjusted = holmAdjusted(differences.map((difference) => difference.pValue));
    return {
      key,
      name,
      unit,
      values: sets.map(valueIn),
      pairs: pairs.map(([from, to], i): ComparedPair => {
        const difference = differences[i] ?? differenceOf(NOTHING, NOTHING);
        const pAdjusted = adjusted[i] ?? null;
        const significant = pAdjusted === null ? null : pAdjusted < SIGNIFICANCE;
        return {
          ...difference,
          from: from.id,
          to: to.id,
          pAdjusted,
          significant,
          sentence: sentenceOn(name, unit, from, to, valueIn, difference, significant),
        };
      }),
    };
  });
  return {
    configurations: sets.map(({ id, label }) => ({ id, label })),
    parameters,
    notes: notesOn(sets.length, pairs.length),
  };
}

function pairsOf(sets: readonly ParameterSet[], against: string | undefined): [ParameterSet, ParameterSet][] {
  if (against === undefined)
    return sets.flatMap((from, i) => sets.slice(i + 1).map((to): [ParameterSet, ParameterSet] => [from, to]));
  const reference = sets.find((set) => set.id === against);
  if (reference === undefined) throw new Error(`no configuration ${against} to compare with`);
  return sets.filter((set) => set !== reference).map((to) => [reference, to]);
}

function sentenceOn(
  name: string,
  unit: string,
  from: ParameterSet,
  to: ParameterSet,
  valueIn: (set: ParameterSet) => ComparedValue,
  { difference, expandedDifference }: Difference,
  significant: boolean | null,
): string {
  const absent = [from, to].filter((set) => valueIn(set).value === null).map((set) => set.label);
  if (difference === null) return `No ${name} for ${absent.join(' and ')}, so nothing can be compared.`;
  const unitText = unit === '' ? '' : ` ${unit}`;
  const size = `${Math.abs(difference).toPrecision(2)}${unitText}`;
  const direction = difference < 0 ? 'lower' : 'higher';
  if (significant === null || expandedDifference === null) {
    const without = [from, to].filter((set) => !((valueIn(set).u ?? 0) > 0)).map((set) => set.label);
    return `The ${name} of ${to.label} is ${size} ${direction} than that of ${from.label}; whether that is significant cannot be told without an uncertainty for ${without.join(' and ')}.`;
  }
  const interval = `± ${expandedDifference.toPrecision(2)}${unitText} (95 %)`;
  return significant
    ? `The ${name} of ${to.label} is ${size} ${direction} than that of ${from.label}, ${interval}: a significant difference.`
    : `The ${name} of ${to.label} and of ${from.label} do not differ significantly: ${size} ${direction}, ${interval}.`;
}

function notesOn(configurations: number, comparisons: number): string[] {
  if (configurations < 2) return ['One configuration only: there is nothing to compare it with.'];
  const notes = [
    'Errors that all configurations share, such as the scale, cancel in ratios and nearly so in differences; they do not count towards significance.',
  ];
  if (comparisons > 1)
    notes.push(
      `Of ${comparisons} comparisons some would look significant by chance alone, 1 in 20 on average; the verdicts allow for that (Holm's method, for each parameter).`,
    );
  return notes;
}
