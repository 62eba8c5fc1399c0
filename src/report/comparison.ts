import type { Measured } from '../numeric/measured.ts';
import type { ComparedValue } from '../resonance/compare-differences.ts';
import { compareMasses, type MassComparisonOutcome } from '../resonance/compare-masses.ts';
import {
  compareParameters,
  type ParameterColumn,
  type ParameterComparison,
} from '../resonance/compare-parameters.ts';
import { compareSettings, type SettingTrendOutcome } from '../resonance/compare-settings.ts';
import type { ConfigurationView } from './configuration-view.ts';

/** Natural frequency against mass, for configurations that differ in mass alone. */
export interface MassTrend {
  readonly views: readonly ConfigurationView[];
  readonly outcome: MassComparisonOutcome;
}

/** A quantity against the setting, for configurations that differ in setting alone. */
export interface QuantityTrend {
  readonly quantity: 'damping ratio' | 'damping coefficient' | 'half-power bandwidth';
  readonly unit: string;
  readonly views: readonly ConfigurationView[];
  readonly valueOf: (view: ConfigurationView) => Measured;
  readonly outcome: SettingTrendOutcome;
}

/** Configurations side by side: parameters with their differences, and trends where the data allow any. */
export interface ConfigurationComparison {
  readonly parameters: ParameterComparison;
  readonly masses: readonly MassTrend[];
  readonly settings: readonly QuantityTrend[];
}

const NOTHING: Measured = { value: null, u: null };
const COLUMNS: readonly ParameterColumn[] = [
  { key: 'naturalHz', name: 'natural frequency', unit: 'Hz' },
  { key: 'dampingRatio', name: 'damping ratio', unit: '' },
  { key: 'bandwidthHz', name: 'half-power bandwidth', unit: 'Hz' },
  { key: 'stiffness', name: 'stiffness', unit: 'N/m' },
  { key: 'dampingCoefficient', name: 'damping coefficient', unit: 'N s/m' },
];

function comparedValues(view: ConfigurationView): Record<string, ComparedValue> {
  const dof = view.resonance?.dof ?? null;
  const values = COLUMNS.map(({ key }): [string, ComparedValue] => [key, { ...parameterOf(view, key), dof }]);
  return Object.fromEntries(values);
}

function parameterOf({ resonance }: ConfigurationView, key: string): Measured {
  if (resonance === null || resonance.error !== null) return NOTHING;
  switch (key) {
    case 'naturalHz':
      return resonance.naturalHz;
    case 'dampingRatio':
      return resonance.dampingRatio;
    case 'bandwidthHz':
      return resonance.bandwidthHz;
    case 'stiffness':
      return resonance.stiffness;
    default:
      return resonance.dampingCoefficient;
  }
}

/** Groups of two or more configurations that agree in `same` and take different values of `varied`. */
function groupsBy(
  views: readonly ConfigurationView[],
  same: (view: ConfigurationView) => number | undefined,
  varied: (view: ConfigurationView) => number | undefined,
): ConfigurationView[][] {
  const groups = new Map<number | undefined, ConfigurationView[]>();
  for (const view of views)
    if (varied(view) !== undefined) groups.set(same(view), [...(groups.get(same(view)) ?? []), view]);
  return [...groups.values()].filter((group) => new Set(group.map(varied)).size > 1);
}

const massOf = (view: ConfigurationView) => view.configuration.movingMass;
const settingOf = (view: ConfigurationView) => view.configuration.setting;

const QUANTITIES = [
  { quantity: 'damping ratio', unit: '', key: 'dampingRatio' },
  { quantity: 'damping coefficient', unit: 'N s/m', key: 'dampingCoefficient' },
  { quantity: 'half-power bandwidth', unit: 'Hz', key: 'bandwidthHz' },
] as const;

/** Compares the configurations of a test; those without a fit take part as missing. */
export function compareConfigurations(views: readonly ConfigurationView[]): ConfigurationComparison {
  const columns = COLUMNS.filter(({ key }) => views.some((view) => parameterOf(view, key).value !== null));
  return {
    parameters: compareParameters(
      views.map((view) => ({
        id: view.configuration.id,
        label: view.name,
        parameters: comparedValues(view),
      })),
      columns,
    ),
    masses: groupsBy(views, settingOf, massOf).map((group) => ({
      views: group,
      outcome: compareMasses(
        group.map((view) => ({
          label: view.name,
          massKg: massOf(view) ?? Number.NaN,
          uMassKg: view.configuration.movingMassU ?? 0,
          naturalHz: parameterOf(view, 'naturalHz'),
        })),
      ),
    })),
    settings: groupsBy(views, massOf, settingOf).flatMap((group) =>
      QUANTITIES.filter(({ key }) => group.some((view) => parameterOf(view, key).value !== null)).map(
        ({ quantity, unit, key }): QuantityTrend => ({
          quantity,
          unit,
          views: group,
          valueOf: (view) => parameterOf(view, key),
          outcome: compareSettings(
            group.map((view) => ({
              label: view.name,
              setting: settingOf(view) ?? null,
              value: parameterOf(view, key),
            })),
            { quantity },
          ),
        }),
      ),
    ),
  };
}
